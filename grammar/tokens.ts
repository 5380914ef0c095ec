import { createToken, type ITokenConfig, Lexer, type TokenType } from './chevrotain'

// Categories. A token of a category is taken wherever the category is asked for.

/** Any word that can name something: identifiers, and the words that are reserved only where they stand. */
export const Name = createToken({
  name: 'Name',
  label: 'a name',
  pattern: new RegExp(
    // Latin, Greek, Cyrillic, CJK; then digits, subscript digits and primes, as papers write them.
    '[A-Za-z_\\u00C0-\\u00D6\\u00D8-\\u00F6\\u00F8-\\u024F\\u0370-\\u03FF\\u0400-\\u04FF\\u3040-\\u30FF\\u4E00-\\u9FFF\\uAC00-\\uD7A3]' +
      "[A-Za-z0-9_'\\u2032\\u2080-\\u2089\\u00C0-\\u00D6\\u00D8-\\u00F6\\u00F8-\\u024F\\u0370-\\u03FF\\u0400-\\u04FF\\u3040-\\u30FF\\u4E00-\\u9FFF\\uAC00-\\uD7A3]*",
  ),
})
/** What joins two operands, right or wrong. */
export const Infix = createToken({ name: 'Infix', label: 'an operator', pattern: Lexer.NA })
/** Those of them that join numbers or words, no conditions. */
export const Arithmetic = createToken({
  name: 'Arithmetic',
  label: 'an operator',
  pattern: Lexer.NA,
  categories: [Infix],
})
/** What stands before one operand, right or wrong. */
export const Prefix = createToken({ name: 'Prefix', label: 'an operator', pattern: Lexer.NA })
/** The arrow, and what other languages write in its place. */
export const Assign = createToken({ name: 'Assign', label: '`<-`', pattern: Lexer.NA })
/** `++` and `--`, which other languages have. */
export const Step = createToken({ name: 'Step', label: '`<-`', pattern: Lexer.NA })
/** `sum`, `all`, `any`. */
export const Quantifier = createToken({ name: 'Quantifier', label: '`sum`', pattern: Lexer.NA, categories: [Name] })

const all: TokenType[] = []

function token(name: string, pattern: RegExp | string, more: Partial<ITokenConfig> = {}): TokenType {
  const type = createToken({ name, pattern, label: typeof pattern === 'string' ? `\`${pattern}\`` : name, ...more })
  all.push(type)
  return type
}

/** A word of the notation that can name nothing else. */
function reserved(word: string, more: Partial<ITokenConfig> & { pattern?: RegExp } = {}): TokenType {
  const name = word[0]!.toUpperCase() + word.slice(1)
  return token(name, more.pattern ?? word, { longer_alt: Name, label: `\`${word}\``, ...more })
}

/** A word that is a word of the notation in its place alone, and a name anywhere else. */
function placed(word: string, categories: TokenType[] = [Name]): TokenType {
  return reserved(word, { categories })
}

export const Newline = token('Newline', /\r\n|\r|\n/, { label: 'the end of the line', line_breaks: true })
token('Blank', /[ \t\f\v\u00A0\u00AD\u1680\u2000-\u200D\u2028\u2029\u202F\u205F\u2060\u3000\uFEFF]+/, {
  group: Lexer.SKIPPED,
  line_breaks: false,
})
export const CommentText = token('Comment', /#[^\r\n]*/, { group: 'comments' })
export const Numeral = token('Number', /0[xX][0-9a-fA-F][0-9a-fA-F_]*|0[bB][01][01_]*|[0-9][0-9_]*(?:\.[0-9]+)?/, {
  label: 'a number',
})

// Words
export const Routine = reserved('routine')
export const Begin = reserved('begin')
export const End = reserved('end')
export const If = reserved('if')
export const Else = reserved('else')
export const While = reserved('while')
export const Repeat = reserved('repeat')
export const Until = reserved('until')
export const For = reserved('for')
export const Goto = reserved('goto')
export const Halt = reserved('halt')
export const Return = reserved('return')
export const Procedure = reserved('procedure')
export const Assert = reserved('assert')
export const And = reserved('and', { pattern: /and|∧/, categories: [Infix] })
export const Or = reserved('or', { pattern: /or|∨/, categories: [Infix] })
export const Not = reserved('not', { pattern: /not|¬/, categories: [Prefix] })
export const Mod = reserved('mod', { categories: [Arithmetic] })
export const Xor = reserved('xor', { pattern: /xor|⊕|⊻/, categories: [Arithmetic] })

export const Inout = placed('inout')
export const In = placed('in')
export const Out = placed('out')
export const Work = placed('work')
export const Let = placed('let')
export const Fix = placed('fix')
export const Need = placed('need')
export const Feed = placed('feed')
export const Claim = placed('claim')
export const Check = placed('check')
export const From = placed('from')
export const To = placed('to')
export const Downto = placed('downto')
export const By = placed('by')
export const Then = placed('then')
export const Do = placed('do')
export const Sum = placed('sum', [Quantifier])
export const All = placed('all', [Quantifier])
export const Any = placed('any', [Quantifier])
export const Time = placed('time')
export const Space = placed('space')
export const Distinct = placed('distinct')

all.push(Name)

// Signs. Of two that begin alike the longer comes first. The wrong ones are there to be understood and corrected.
export const PlusPlus = token('PlusPlus', '++', { categories: [Step] })
// Two minus signs are a decrement only where nothing follows: `x - -y` is in order.
export const MinusMinus = token('MinusMinus', /--(?![ \t]*[^ \t\r\n#;])/, {
  label: '`--`',
  categories: [Step],
})
export const CompoundAssign = token('CompoundAssign', /(?:\+|-|\*|&|\||\^|%|<<|>>)=/, { categories: [Assign] })
export const Arrow = token('Arrow', /<-|←|⟵/, { label: '`<-`', categories: [Assign] })
export const Gives = token('Gives', /->|→|⟶/, { label: '`->`' })
export const ColonEqual = token('ColonEqual', /:=|≔/, { categories: [Assign] })
export const DoubleEqual = token('DoubleEqual', /===?/, { categories: [Infix, Assign] })
export const WrongNotEqual = token('WrongNotEqual', /<>|~=|!==/, { categories: [Infix] })
export const SlashEqual = token('SlashEqual', '/=', { categories: [Infix, Assign] })
export const WrongLessEqual = token('WrongLessEqual', '=<', { categories: [Infix] })
export const WrongGreaterEqual = token('WrongGreaterEqual', '=>', { categories: [Infix] })
export const AndAnd = token('AndAnd', '&&', { categories: [Infix] })
export const OrOr = token('OrOr', '||', { categories: [Infix] })
export const StarStar = token('StarStar', '**', { categories: [Arithmetic] })
export const SlashSlash = token('SlashSlash', '//', { categories: [Arithmetic] })
export const Percent = token('Percent', '%', { categories: [Arithmetic] })
export const TripleShift = token('TripleShift', '>>>', { categories: [Arithmetic] })
export const ShiftLeft = token('ShiftLeft', /<<|≪/, { label: '`<<`', categories: [Arithmetic] })
export const ShiftRight = token('ShiftRight', />>|≫/, { label: '`>>`', categories: [Arithmetic] })
export const LessEqual = token('LessEqual', /<=|≤|⩽/, { label: '`<=`', categories: [Infix] })
export const GreaterEqual = token('GreaterEqual', />=|≥|⩾/, { label: '`>=`', categories: [Infix] })
export const NotEqual = token('NotEqual', /!=|≠/, { label: '`!=`', categories: [Infix] })
export const Less = token('Less', '<', { categories: [Infix] })
export const Greater = token('Greater', '>', { categories: [Infix] })
export const Equal = token('Equal', '=', { categories: [Infix, Assign] })
export const Plus = token('Plus', '+', { categories: [Arithmetic, Prefix] })
export const Minus = token('Minus', /-|−/, { label: '`-`', categories: [Arithmetic, Prefix] })
export const Times = token('Times', /[*·×⋅∗]/, { label: '`*`', categories: [Arithmetic, Prefix] })
export const Slash = token('Slash', '/', { categories: [Arithmetic] })
export const Caret = token('Caret', '^', { categories: [Arithmetic] })
export const Ampersand = token('Ampersand', '&', { categories: [Arithmetic, Prefix] })
export const Bar = token('Bar', '|', { categories: [Arithmetic] })
export const Tilde = token('Tilde', '~', { categories: [Prefix] })
export const Bang = token('Bang', '!', { categories: [Prefix] })
export const LeftParen = token('LeftParen', '(')
export const RightParen = token('RightParen', ')')
export const LeftSquare = token('LeftSquare', '[')
export const RightSquare = token('RightSquare', ']')
export const LeftCeil = token('LeftCeil', '⌈')
export const RightCeil = token('RightCeil', '⌉')
export const LeftFloor = token('LeftFloor', '⌊')
export const RightFloor = token('RightFloor', '⌋')
export const LeftBrace = token('LeftBrace', '{')
export const RightBrace = token('RightBrace', '}')
export const Comma = token('Comma', ',')
export const Semicolon = token('Semicolon', ';')
export const Colon = token('Colon', ':')
export const Range = token('Range', /\.\.\.?|…/, { label: '`..`' })

/** Every token type, in the order in which they are tried; categories last. */
export const VOCABULARY: readonly TokenType[] = [...all, Infix, Arithmetic, Prefix, Assign, Step, Quantifier]

/** The words that open a declaration. */
export const DECLARATION_WORDS: ReadonlySet<TokenType> = new Set([
  In,
  Out,
  Inout,
  Work,
  Let,
  Fix,
  Need,
  Feed,
  Claim,
  Check,
])

/** The words that can name nothing, in the order in which the reference lists them. */
export const RESERVED_WORDS: readonly string[] = [
  'routine',
  'begin',
  'end',
  'procedure',
  'if',
  'else',
  'while',
  'repeat',
  'until',
  'for',
  'goto',
  'halt',
  'return',
  'assert',
  'and',
  'or',
  'not',
  'mod',
  'xor',
]

/** The words of the notation that are names outside of their place. */
export const PLACED_WORDS: readonly string[] = [
  'in',
  'out',
  'inout',
  'work',
  'let',
  'fix',
  'need',
  'feed',
  'claim',
  'check',
  'from',
  'to',
  'downto',
  'by',
  'then',
  'do',
  'sum',
  'all',
  'any',
  'time',
  'space',
  'distinct',
]

/** Whether a token of type `type` is taken where `category` is asked for. */
export function isOf(type: TokenType, category: TokenType): boolean {
  return type === category || (category.categoryMatchesMap?.[type.tokenTypeIdx!] ?? false)
}
