autocmd BufRead,BufNewFile *.drive,*.method setfiletype backcone
