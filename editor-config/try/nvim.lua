-- Drives Neovim (0.10 or newer) on a copy of a sample: open, margins as inlay hints, break a line, repair it, apply a computed
-- fix, rename, format. Run by editor-config/try/run.sh:
--   BACKCONE=/path/backcone SPEC=/tmp/x/clinker_elevator.drive nvim --headless -u NONE -i NONE -n -l nvim.lua
local passed, failed = 0, 0
local function check(what, ok, more)
  if ok then passed = passed + 1 else failed = failed + 1 end
  io.stdout:write((ok and 'ok      ' or 'FAILED  ') .. what .. (ok and '' or ('   ' .. vim.inspect(more))) .. '\n')
end
local function wait(ms, f) return vim.wait(ms, f, 20) end

vim.o.swapfile = false
vim.filetype.add({ extension = { drive = 'backcone', method = 'backcone' } })
vim.cmd('edit ' .. vim.fn.fnameescape(vim.env.SPEC))
local buf = vim.api.nvim_get_current_buf()
vim.bo[buf].filetype = 'backcone'
local id = vim.lsp.start({
  name = 'backcone', cmd = { vim.env.BACKCONE, 'serve' }, root_dir = vim.fn.fnamemodify(vim.env.SPEC, ':h'),
  flags = { debounce_text_changes = 0 },
})
check('the server starts', id ~= nil)
local client
wait(60000, function() client = id and vim.lsp.get_client_by_id(id) return client and client.initialized end)

local function codes()
  local t = {}
  for _, d in ipairs(vim.diagnostic.get(buf)) do t[tostring(d.code)] = (t[tostring(d.code)] or 0) + 1 end
  return t
end
check('what is short is on the problem list', wait(60000, function() return codes().BC5001 ~= nil end), codes())

local function line_of(text)
  for i, l in ipairs(vim.api.nvim_buf_get_lines(buf, 0, -1, false)) do
    if l:find(text, 1, true) then return i - 1, l end
  end
end
local function hints()
  local t = {}
  local r = vim.lsp.buf_request_sync(buf, 'textDocument/inlayHint', {
    textDocument = { uri = vim.uri_from_bufnr(buf) },
    range = { start = { line = 0, character = 0 }, ['end'] = { line = vim.api.nvim_buf_line_count(buf), character = 0 } },
  }, 20000)
  for _, a in pairs(r or {}) do for _, h in ipairs(a.result or {}) do t[#t + 1] = h end end
  return t
end
vim.lsp.inlay_hint.enable(true, { bufnr = buf })
check('margins stand beside requirements', wait(20000, function()
  return #vim.lsp.inlay_hint.get({ bufnr = buf }) > 8
end), #hints())
local function marks()
  local n = 0
  for name, ns in pairs(vim.api.nvim_get_namespaces()) do
    if name:find('inlay') then n = n + #vim.api.nvim_buf_get_extmarks(buf, ns, 0, -1, {}) end
  end
  return n
end
vim.cmd('redraw')
check('they are marks in the text', marks() > 0 or #vim.lsp.inlay_hint.get({ bufnr = buf }) > 8, marks())

-- break a line and repair it
local broken, whole = line_of('face_width           = 56 mm')
vim.api.nvim_buf_set_lines(buf, broken, broken + 1, false, { '    face_width           = 56 rpm' })
check('a wrong unit is told', wait(20000, function() return codes().BC3003 ~= nil end), codes())
vim.api.nvim_buf_set_lines(buf, broken, broken + 1, false, { whole })
check('and no longer when it is mended', wait(20000, function() return codes().BC3003 == nil and codes().BC5001 ~= nil end), codes())

-- hover
local at, text = line_of('pitting >= 1.20')
local hover = vim.lsp.buf_request_sync(buf, 'textDocument/hover', {
  textDocument = { uri = vim.uri_from_bufnr(buf) }, position = { line = at, character = 6 } }, 20000)
local said = ''
for _, a in pairs(hover or {}) do if a.result then said = a.result.contents.value end end
check('hover tells equation and margin', said:find('safety factor against pitting', 1, true) and said:find('margin', 1, true), said)

-- a computed fix
local actions = vim.lsp.buf_request_sync(buf, 'textDocument/codeAction', {
  textDocument = { uri = vim.uri_from_bufnr(buf) },
  range = { start = { line = at, character = 4 }, ['end'] = { line = at, character = 4 } },
  context = { diagnostics = {} } }, 60000)
local fix
for _, a in pairs(actions or {}) do
  for _, x in ipairs(a.result or {}) do
    if not fix and x.edit and x.title:find('margin', 1, true) then fix = x end
  end
end
check('fixes that compute are offered', fix ~= nil, actions)
if fix then
  io.stdout:write('        ' .. fix.title .. '\n')
  local before = vim.inspect(hints())
  vim.lsp.util.apply_workspace_edit(fix.edit, client.offset_encoding)
  check('applied, the margins move', wait(20000, function() return vim.inspect(hints()) ~= before end))
  vim.cmd('undo')
end

-- rename
local shaft = line_of('shaft lay')
vim.api.nvim_win_set_cursor(0, { shaft + 1, 9 })
vim.lsp.buf.rename('counter')
check('a shaft is renamed wherever it is named', wait(20000, function()
  return line_of('shaft counter') and line_of('pinion on counter') and line_of('wheel on counter') and not line_of(' on lay ')
end))

-- format
local indented = line_of('normal_module        = 4 mm')
vim.api.nvim_buf_set_lines(buf, indented, indented + 1, false, { 'normal_module = 4 mm' })
wait(2000, function() return false end)
vim.lsp.buf.format({ timeout_ms = 20000 })
check('the layout is mended', wait(5000, function() return line_of('    normal_module        = 4 mm') ~= nil end), line_of('normal_module'))

client.stop()
check('and it stops', wait(10000, function() return client.is_stopped() end))
io.stdout:write(('neovim: %d passed, %d failed\n'):format(passed, failed))
vim.cmd(failed == 0 and 'qa!' or 'cquit 1')
