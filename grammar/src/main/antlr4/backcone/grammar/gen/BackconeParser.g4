/*
 * One grammar for drives and handbook texts. What may stand where is checked on the tree.
 *
 * The token list has already decided where an entry starts, what it is and where it ends (backcone.grammar.Tokens), and
 * its braces are balanced. So every choice here is made on one token or two, an error never looks past its entry, and
 * every token list is a file: what an entry could not use is marked LOST when the entry is over, and `rest` takes it.
 */
parser grammar BackconeParser;

options {
    tokenVocab = BackconeLexer;
    superClass = EntryParser;
}

@header {
import backcone.grammar.EntryParser;
}

file : entries EOF ;
entries : (entry | end)* ;
end : NL | SEMI ;

entry
    locals [Object tree]
    : (fact | factFor | requirement | block | declaration | stray
      | drive | use | let | rate | require | assertion | override | accept | waive | variant | family
      | quantity | source | choice | kind | chapter | method | include | function | table | parts | part | role
      | collect | cases | eachBlock | editions | relation | check | limit | applies | example | gives)
      {loseRest();} rest? {built($ctx);}
    ;

/** What an entry could not use, up to its end. Bodies in it still hold entries. */
rest
    : (LOST
      | LOST_BODY entries RBRACE
      | LOST_ROWS rowList RBRACE
      | LOST_ARMS armList RBRACE
      | LOST_WORDS wordList RBRACE)+
    ;
stray : STRAY ;

body : LBRACE entries RBRACE ;
rows : ROWS_OPEN rowList RBRACE ;
rowList : (row | end)* ;
row : cells {loseRest();} rest? ;
cells : ROW cell (PIPE cell)* ;
cell : value (COMMA value)* ;
arms : ARMS_OPEN armList RBRACE ;
armList : (arm | end)* ;
arm : oneArm {loseRest();} rest? ;
oneArm : ARM (ELSE | when=expr) ARROW then=expr ;
words : WORDS_OPEN wordList RBRACE ;
wordList : (word | WORD_COMMA | end)* ;
word : oneWord {loseRest();} rest? ;
oneWord : WORD NAME text? ;

// ---- blocks and facts

fact : FACT path ASSIGN value note* ;
factFor : FACT_FOR id=NAME FOR other=NAME ASSIGN value note* ;
requirement : REQUIREMENT path cmpSign sum note* ;
block : BLOCK head=NAME id=NAME? (ON shaft=NAME)? text? body? ;
declaration : DECLARATION id=NAME symbol=NAME? text? COLON ofKind=NAME (IN UNIT)? note* (definition note*)? ;
definition : ASSIGN value | DEFAULT value | RELATED expr ;

// ---- drives

drive : DRIVE id=NAME text? body ;
use : USE (text (AS alias=NAME)? | id=NAME FOR path) note* ;
let : LET id=NAME ASSIGN value note* ;
rate : RATE path BY id=NAME rateWord* body? ;
rateWord : EDITION NUMBER | AS NAME | UNDER NAME ;
require : REQUIRE expr (BETWEEN low=sum AND high=sum | WITHIN tolerance=sum (OF middle=sum)?)? note* ;
assertion : ASSERT expr note* ;
override : OVERRIDE path ASSIGN value note* ;
accept : ACCEPT path cmpSign sum note* ;
waive : WAIVE path note* ;
variant : VARIANT id=NAME OF base=NAME text? body ;
family : FAMILY id=NAME OF base=NAME text? rows ;

// ---- handbook

quantity : QUANTITY id=NAME IN UNIT text? WHOLE? (UNLIKE names)? ;
source : SOURCE id=NAME text ;
choice : CHOICE id=NAME text? words ;
kind : KIND id=NAME (IS base=NAME)? text? body ;
chapter : CHAPTER id=NAME FOR ofKind=NAME text? body ;
method : METHOD id=NAME FOR ofKind=NAME text? body ;
include : INCLUDE names ;
function : FUNCTION id=NAME LPAREN parameters? RPAREN text? COLON ofKind=NAME ASSIGN expr note* ;
parameters : parameter (COMMA parameter)* ;
parameter : id=NAME COLON ofKind=NAME ;
table : TABLE id=NAME text? BY names (COLON ofKind=NAME (IN UNIT)?)? note* rows ;
parts : PARTS names COLON ofKind=NAME (AS alias=NAME)? ;
part : PART id=NAME COLON ofKind=NAME text? ;
role : ROLE id=NAME ASSIGN expr ;
collect : COLLECT id=NAME ASSIGN ofKind=NAME WHERE expr ;
cases : CASES id=NAME words ;
eachBlock : EACH_BLOCK id=NAME body ;
editions : EDITIONS NUMBER (COMMA NUMBER)* ;
relation : RELATION text? (WHEN condition=expr)? COLON equation=expr note* ;
check : CHECK id=NAME text? (COLON ofKind=NAME)? ASSIGN expr note* ;
limit : LIMIT id=NAME text? (AS level=NAME)? (FOR names)? COLON expr note* ;
applies : APPLIES WHEN expr note* ;
example : EXAMPLE text note* body ;
gives : GIVES path ASSIGN value (WITHIN sum)? ;

names : NAME (COMMA NAME)* ;
text : STRING | OPENSTRING ;

// ---- notes

note
    : PER (said=text | id=NAME said=text?) (ON DATE)? (COMMA trust=NAME seen=text?)?   # perNote
    | MEASURED text?                                             # measuredNote
    | ASSUMED (BECAUSE text)?                                    # assumedNote
    | BECAUSE text                                               # becauseNote
    | UNTIL DATE                                                 # untilNote
    | BY text                                                    # byNote
    | ELSE text                                                  # elseNote
    | TAKING taken (COMMA taken)*                                # takingNote
    | READING id=NAME ASSIGN expr                                   # readingNote
    | RANGE low=sum TO high=sum                                           # rangeNote
    | ROWS rowWord (COMMA rowWord)*                              # rowsNote
    | WORST NAME                                                 # worstNote
    | IS NAME                                                    # isNote
    | NEEDED text?                                               # neededNote
    | OFFER expr                                                 # offerNote
    | WITHIN sum                                                 # withinNote
    ;
taken : path (AS alias=NAME)? IN UNIT ;
rowWord : NAME NAME? ;

// ---- values and expressions

value : REFERENCE head=NAME id=NAME | expr (DOTDOT high=sum | TOL from=sum DOTDOT to=sum | ON DATE)? ;

/*
 * Two flat levels instead of one rule for each rank of operators: the tree is built with the usual ranks afterwards,
 * and a plain number costs four rules instead of ten.
 */
expr
    : NOT* compare ((AND | OR) NOT* compare)*
    | ROOT OF left=sum EQ right=sum BETWEEN low=sum AND high=sum (ELSE text)?
    | SETTLE what=sum FROM begin=sum WITHIN tolerance=sum AT MOST most=sum (ELSE text)?
    ;
compare : sum ((EQ | NE | LE | GE | LT | GT) sum)* ;
cmpSign : EQ | NE | LE | GE | LT | GT ;
sum : (MINUS | PLUS)* operand ((PLUS | MINUS | STAR | SLASH | CARET) (MINUS | PLUS)* operand)* ;
operand
    : ( NUMBER UNIT?
      | text
      | DATE
      | LPAREN expr RPAREN
      | path call?
      | GIVEN path
      | CHOOSE sum? arms
      )
      (IN UNIT)*
    ;
call : LPAREN (arg (COMMA arg)*)? RPAREN (DOT NAME)* ;
arg : EACH NAME (COLON expr)? | expr ;
path : NAME (DOT NAME)* ;
