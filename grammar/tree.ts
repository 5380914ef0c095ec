import type { Span } from './span'

/** An identifier where it stands. */
export interface Name {
  readonly text: string
  readonly span: Span
}

// Exact expressions: declarations, claims, checks, asserts and bounds. Integers and rationals without limit.

export type ExactOperator = '+' | '-' | '*' | '/' | '^' | 'mod'
export type ExactFunction = 'lg' | 'ceil' | 'floor' | 'min' | 'max' | 'abs' | 'popcount'

export type Exact =
  /**
   * A literal; `denominator` is 1 unless written with a decimal point (0.5 is 1/2, in lowest terms). `written` is
   * the literal as it stands where that is not its plain decimal form (`0xff`, `0b101`, `1_000`).
   */
  | {
      readonly kind: 'number'
      readonly numerator: bigint
      readonly denominator: bigint
      readonly written?: string
      readonly span: Span
    }
  /** A size, let, fix, scalar, bound index or `w`; in an assert also a variable. */
  | { readonly kind: 'name'; readonly name: Name; readonly span: Span }
  | {
      readonly kind: 'binary'
      readonly operator: ExactOperator
      readonly left: Exact
      readonly right: Exact
      readonly span: Span
    }
  | { readonly kind: 'negate'; readonly operand: Exact; readonly span: Span }
  | {
      readonly kind: 'call'
      readonly function: ExactFunction
      readonly arguments: readonly Exact[]
      readonly span: Span
    }
  /** `a[E]`, or `old(a)[E]` where `array.old` is set. */
  | { readonly kind: 'element'; readonly array: Content; readonly index: Exact; readonly span: Span }
  /** `old(x)` of a scalar. */
  | { readonly kind: 'old'; readonly name: Name; readonly span: Span }
  /** `sum(a)`: the sum of an array's words. */
  | { readonly kind: 'total'; readonly array: Content; readonly span: Span }
  /** `sum i in F..T : E`, both ends included. */
  | {
      readonly kind: 'sum'
      readonly index: Name
      readonly from: Exact
      readonly to: Exact
      readonly body: Exact
      readonly span: Span
    }

/** An array's content: at the end of the run, or (`old(a)`) before it. */
export interface Content {
  readonly name: Name
  readonly old: boolean
  readonly span: Span
}

export type Comparison = '=' | '!=' | '<' | '<=' | '>' | '>='

export type ExactCondition =
  | {
      readonly kind: 'compare'
      readonly operator: Comparison
      readonly left: Exact
      readonly right: Exact
      readonly span: Span
    }
  | {
      readonly kind: 'and' | 'or'
      readonly left: ExactCondition
      readonly right: ExactCondition
      readonly span: Span
    }
  | { readonly kind: 'not'; readonly operand: ExactCondition; readonly span: Span }
  /** `all i in F..T : C` and `any i in F..T : C`, both ends included. */
  | {
      readonly kind: 'all' | 'any'
      readonly index: Name
      readonly from: Exact
      readonly to: Exact
      readonly body: ExactCondition
      readonly span: Span
    }
  /** `sorted(a)`: words never fall from one element to the next. */
  | { readonly kind: 'sorted'; readonly array: Content; readonly span: Span }
  /** `same(a, b)`: equal as multisets. */
  | { readonly kind: 'same'; readonly left: Content; readonly right: Content; readonly span: Span }

// Declarations

export interface DeclaredItem {
  readonly name: Name
  /** Absent for a scalar. */
  readonly length?: Exact
  readonly span: Span
}

export type Declaration =
  | { readonly kind: 'in' | 'out' | 'inout' | 'work'; readonly items: readonly DeclaredItem[]; readonly span: Span }
  | { readonly kind: 'let'; readonly name: Name; readonly value: Exact; readonly span: Span }
  /** `fix m = E`. */
  | { readonly kind: 'fix'; readonly name: Name; readonly value: Exact; readonly span: Span }
  /** `fix t[E] = E, E, ...`. */
  | {
      readonly kind: 'table'
      readonly name: Name
      readonly length: Exact
      readonly values: readonly Exact[]
      readonly span: Span
    }
  /** `fix t[i in F .. T] = E`; element number k holds E at i = F + k. */
  | {
      readonly kind: 'formula'
      readonly name: Name
      readonly index: Name
      readonly from: Exact
      readonly to: Exact
      readonly value: Exact
      readonly span: Span
    }
  | { readonly kind: 'need'; readonly condition: ExactCondition; readonly span: Span }
  /** `feed a[i] in F .. T` (with `index`) and `feed x in F .. T`. */
  | {
      readonly kind: 'feed-range'
      readonly name: Name
      readonly index?: Name
      readonly from: Exact
      readonly to: Exact
      readonly span: Span
    }
  /** `feed a distinct`. */
  | { readonly kind: 'feed-distinct'; readonly name: Name; readonly span: Span }
  | {
      readonly kind: 'claim'
      readonly measure: 'time' | 'space'
      readonly operator: '<=' | '='
      readonly bound: Exact
      readonly span: Span
    }
  | { readonly kind: 'check'; readonly condition: ExactCondition; readonly span: Span }

// Word code

export type WordOperator = '+' | '-' | '*' | '/' | 'mod' | '&' | '|' | 'xor' | '<<' | '>>'
export type WordFunction = 'popcount' | 'msb' | 'lsb'

export type WordExpression =
  /** `written` is the literal as it stands where that is not its plain decimal form (`0xff`, `0b101`, `1_000`). */
  | { readonly kind: 'number'; readonly value: bigint; readonly written?: string; readonly span: Span }
  /** A variable, scalar, size, let, fix or `w`. */
  | { readonly kind: 'name'; readonly name: Name; readonly span: Span }
  | {
      readonly kind: 'binary'
      readonly operator: WordOperator
      readonly left: WordExpression
      readonly right: WordExpression
      readonly span: Span
    }
  | { readonly kind: 'negate' | 'complement'; readonly operand: WordExpression; readonly span: Span }
  | {
      readonly kind: 'call'
      readonly function: WordFunction
      readonly argument: WordExpression
      readonly span: Span
    }
  /** `a[i]` of an array, or `p[i]` of a variable that holds an address. */
  | { readonly kind: 'element'; readonly base: Name; readonly index: WordExpression; readonly span: Span }
  /** `[p]`. */
  | { readonly kind: 'indirect'; readonly address: WordExpression; readonly span: Span }
  /** `addr(a)`. */
  | { readonly kind: 'address'; readonly array: Name; readonly span: Span }

/** What an arrow can point at. */
export type Target = Extract<WordExpression, { kind: 'name' | 'element' | 'indirect' }>

export type WordCondition =
  | {
      readonly kind: 'compare'
      readonly operator: Comparison
      readonly signed: boolean
      readonly left: WordExpression
      readonly right: WordExpression
      readonly span: Span
    }
  | {
      readonly kind: 'and' | 'or'
      readonly left: WordCondition
      readonly right: WordCondition
      readonly span: Span
    }
  | { readonly kind: 'not'; readonly operand: WordCondition; readonly span: Span }

export interface Branch {
  readonly condition: WordCondition
  readonly body: readonly Statement[]
  /** The `if C` or `else if C` line. */
  readonly span: Span
}

export type Statement =
  | { readonly kind: 'assign'; readonly target: Target; readonly value: WordExpression; readonly span: Span }
  /** `hi, lo <- y * z`. */
  | {
      readonly kind: 'product'
      readonly high: Target
      readonly low: Target
      readonly left: WordExpression
      readonly right: WordExpression
      readonly span: Span
    }
  /** `u, v <- f(x, y)`; no results where it stands alone. */
  | {
      readonly kind: 'call'
      readonly results: readonly Target[]
      readonly procedure: Name
      readonly arguments: readonly WordExpression[]
      readonly span: Span
    }
  | { readonly kind: 'label'; readonly name: Name; readonly span: Span }
  | { readonly kind: 'goto'; readonly label: Name; readonly span: Span }
  | { readonly kind: 'if-goto'; readonly condition: WordCondition; readonly label: Name; readonly span: Span }
  /** `span` of a structured form is the whole form; `end` is its closing line. */
  | {
      readonly kind: 'while'
      readonly condition: WordCondition
      readonly body: readonly Statement[]
      readonly end: Span
      readonly span: Span
    }
  | {
      readonly kind: 'repeat'
      readonly body: readonly Statement[]
      readonly until: WordCondition
      readonly end: Span
      readonly span: Span
    }
  | {
      readonly kind: 'for'
      readonly variable: Name
      readonly from: WordExpression
      readonly to: WordExpression
      readonly step?: WordExpression
      readonly down: boolean
      readonly body: readonly Statement[]
      readonly end: Span
      readonly span: Span
    }
  | {
      readonly kind: 'if'
      readonly branches: readonly Branch[]
      readonly otherwise?: { readonly body: readonly Statement[]; readonly span: Span }
      readonly end: Span
      readonly span: Span
    }
  | { readonly kind: 'halt'; readonly span: Span }
  /** `values` absent for a bare `return`, which gives the result variables as they stand. */
  | { readonly kind: 'return'; readonly values?: readonly WordExpression[]; readonly span: Span }
  | { readonly kind: 'assert'; readonly condition: ExactCondition; readonly span: Span }
  /** Taken at the top level of a body only, and among the declarations. */
  | ProcedureTree

export interface ProcedureTree {
  readonly kind: 'procedure'
  readonly name: Name
  readonly parameters: readonly Name[]
  readonly results: readonly Name[]
  readonly body: readonly Statement[]
  readonly end: Span
  readonly span: Span
}

/** A comment, without its `#`; `own` where nothing else stands on its line. Kept so that the printer loses none. */
export interface Comment {
  readonly text: string
  readonly line: number
  readonly own: boolean
}

/** One routine as written. Printing it and parsing the print gives the same tree, spans apart. */
export interface RoutineTree {
  readonly name: Name
  /** Declarations and procedures before `begin`, in order. */
  readonly declarations: readonly (Declaration | ProcedureTree)[]
  readonly body: readonly Statement[]
  readonly begin: Span
  readonly end: Span
  readonly span: Span
  readonly comments: readonly Comment[]
  /** Lines (from 1) of the source that are blank, so that the printer keeps paragraphs. */
  readonly blanks: readonly number[]
}
