/*
 * The letters of Backcone, for drives and methods alike.
 *
 * Every word comes out as NAME. Which of them are keywords, what a unit is, where an entry starts and which line ends
 * count is decided on the token list (backcone.grammar.Tokens), since a word is a keyword only where no name can stand.
 * Letters are listed, never written as a Unicode class: the tables of a class alone cost more start-up time than all
 * the rest of this lexer.
 */
lexer grammar BackconeLexer;

tokens {
    UNIT,
    // what an entry is: markers without text at its start
    FACT, FACT_FOR, REQUIREMENT, BLOCK, DECLARATION, STRAY, ROW, ARM, WORD,
    // a value that is a reference to a shared block: a marker too
    REFERENCE,
    // words that start an entry
    DRIVE, USE, LET, RATE, REQUIRE, ASSERT, OVERRIDE, ACCEPT, WAIVE, VARIANT, FAMILY,
    QUANTITY, SOURCE, CHOICE, KIND, CHAPTER, METHOD, INCLUDE, FUNCTION, TABLE, PARTS, PART, ROLE, COLLECT, CASES,
    EACH_BLOCK, EDITIONS, RELATION, CHECK, LIMIT, APPLIES, EXAMPLE, GIVES,
    // words inside an entry
    IN, AND, OR, NOT, ELSE, EACH, CHOOSE, GIVEN, ROOT, SETTLE,
    OF, TO, UNTIL, BY, WITHIN, TAKING, FOR, FROM, BETWEEN, AT, MOST, READING, DEFAULT, RELATED, RANGE, EDITION, AS, ON,
    ROWS, PER, MEASURED, ASSUMED, BECAUSE, IS, WORST, NEEDED, OFFER, TOL, UNDER, WHERE, WHEN, UNLIKE, WHOLE,
    // braces by what they hold; all are closed by RBRACE
    ROWS_OPEN, ARMS_OPEN, WORDS_OPEN,
    // the comma between words of a list in braces
    WORD_COMMA,
    // what an entry could not use, set by the parser while it reads
    LOST, LOST_BODY, LOST_ROWS, LOST_ARMS, LOST_WORDS
}

NL : '\r'? '\n' | '\r' ;
WS : [ \t\f\u00A0\u2007\u2009\u202F]+ -> skip ;
COMMENT : '#' ~[\r\n]* -> channel(HIDDEN) ;

DATE : D D D D '-' D D '-' D D ;
NUMBER : D+ ('.' D+)? ([eE] [+\-]? D+)? ;
NAME : L (L | D)* ;
STRING : '"' (~["\\\r\n] | '\\' ~[\r\n])* '"' ;
OPENSTRING : '"' (~["\\\r\n] | '\\' ~[\r\n])* '\\'? ;

ARROW : '=>' ;
EQ : '==' ;
NE : '!=' ;
LE : '<=' ;
GE : '>=' ;
LT : '<' ;
GT : '>' ;
ASSIGN : '=' ;
PLUS : '+' ;
MINUS : '-' ;
STAR : '*' ;
SLASH : '/' ;
CARET : '^' ;
DOTDOT : '..' ;
DOT : '.' ;
COMMA : ',' ;
COLON : ':' ;
SEMI : ';' ;
PIPE : '|' ;
PERCENT : '%' ;
DEGREE : '\u00B0' [A-Z]? ;
LPAREN : '(' ;
RPAREN : ')' ;
LBRACE : '{' ;
RBRACE : '}' ;

/* Anything else, so that the lexer never gives up. */
BAD : . ;

fragment D : [0-9] ;
fragment L
    : [A-Za-z_]
    | '\u00B5'                                  // micro sign
    | [\u0391-\u03A1\u03A3-\u03A9]              // Greek capitals
    | [\u03B1-\u03C9]                           // Greek small letters
    | [\u03D1\u03D5\u03F0\u03F1\u03F5]          // variant forms of theta, phi, kappa, rho, epsilon
    ;
