" Gear drives as text: keywords, numbers with units, strings, comments.
if exists("b:current_syntax")
  finish
endif
syntax keyword backconeEntry accept applies assert cases chapter check choice collect drive edition example
syntax keyword backconeEntry family function gives include kind let limit method override part parts quantity
syntax keyword backconeEntry rate relation require role source table use variant waive
syntax keyword backconeInside as assumed at because between by default edition for from given is measured most
syntax keyword backconeInside needed of offer on per range reading relation root rows settle taking to tol
syntax keyword backconeInside under unlike until when where whole within worst
syntax keyword backconeLogic and choose each else in not or
syntax match backconeBlock /^\s*\zs[a-z_]\+\ze\([^={]*\){/
syntax match backconeProperty /^\s*\zs[A-Za-z_][A-Za-z0-9_.]*\ze\s*=[^=]/
syntax match backconeNumber /\<\d\+\(\.\d\+\)\?\([eE][-+]\?\d\+\)\?\>/
syntax match backconeDate /\<\d\{4}-\d\{2}-\d\{2}\>/
syntax region backconeString start=/"/ end=/"/ oneline
syntax match backconeComment /#.*$/
highlight default link backconeEntry Statement
highlight default link backconeInside Keyword
highlight default link backconeLogic Operator
highlight default link backconeBlock Type
highlight default link backconeProperty Identifier
highlight default link backconeNumber Number
highlight default link backconeDate Number
highlight default link backconeString String
highlight default link backconeComment Comment
let b:current_syntax = "backcone"
