import type { Span } from '../../grammar/span'
import type { Exact, ExactCondition, Name, ProcedureTree, RoutineTree } from '../../grammar/tree'

export type ArrayRole = 'in' | 'out' | 'inout' | 'work' | 'table'

export interface ArrayDeclaration {
  readonly name: string
  readonly role: ArrayRole
  readonly length: Exact
  /** Of a `fix` table: its words, by list or by formula over `index` from `from` on. */
  readonly table?:
    | { readonly kind: 'list'; readonly values: readonly Exact[] }
    | {
        readonly kind: 'formula'
        readonly index: Name
        readonly from: Exact
        readonly to: Exact
        readonly value: Exact
      }
  readonly span: Span
}

export interface ScalarDeclaration {
  readonly name: string
  readonly role: 'in' | 'out' | 'inout'
  readonly span: Span
}

export interface LetDeclaration {
  readonly name: string
  readonly value: Exact
  readonly span: Span
}

export interface FixDeclaration {
  readonly name: string
  readonly value: Exact
  readonly span: Span
}

export interface FeedDeclaration {
  readonly name: string
  readonly distinct: boolean
  /** Inclusive ends; absent: 0 .. 2^w - 1. `index` is the element number's name, which the ends may use. */
  readonly range?: { readonly index?: Name; readonly from: Exact; readonly to: Exact }
  readonly span: Span
}

export interface Claim {
  readonly measure: 'time' | 'space'
  readonly operator: '<=' | '='
  readonly bound: Exact
  readonly span: Span
}

export interface Need {
  readonly condition: ExactCondition
  readonly span: Span
}

export interface Check {
  readonly condition: ExactCondition
  readonly span: Span
}

/** A routine whose names, kinds and forms are in order. */
export interface Routine {
  readonly name: string
  readonly tree: RoutineTree
  /** The source text the spans point into. */
  readonly text: string
  /** In order of appearance: free names in the lengths of in, out and inout arrays. */
  readonly sizes: readonly string[]
  /**
   * In memory order: read-only arrays (in, then fix tables) first, writable ones (inout, out, work) after, each in
   * order of declaration, so that one compare tells an address that may be stored to.
   */
  readonly arrays: readonly ArrayDeclaration[]
  readonly scalars: readonly ScalarDeclaration[]
  readonly lets: readonly LetDeclaration[]
  readonly fixes: readonly FixDeclaration[]
  readonly needs: readonly Need[]
  readonly feeds: readonly FeedDeclaration[]
  readonly claims: readonly Claim[]
  readonly checks: readonly Check[]
  readonly procedures: readonly ProcedureTree[]
}
