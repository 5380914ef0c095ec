import type { Span } from '../../../grammar/span'
import type { ProcedureTree, RoutineTree, Statement } from '../../../grammar/tree'
import { eachStatement, targetsOf } from './walk'

/** The variables of the routine's own body, or of one procedure, and what becomes of them. */
export class VariableScope {
  /** Where each variable is first set, those that come from outside left out. */
  readonly set = new Map<string, Span>()
  /** Variables that only take a half of a product or a result of a call: not every one of those is wanted. */
  readonly takenAlong = new Set<string>()
  /** Filled while the body is checked. */
  readonly read = new Set<string>()

  constructor(
    readonly procedure: ProcedureTree | undefined,
    readonly body: readonly Statement[],
    /** Variables that have a value on entry, or are read on leaving. */
    readonly given: ReadonlySet<string>,
  ) {
    const plainly = new Set<string>()
    for (const statement of eachStatement(body)) {
      for (const target of targetsOf(statement)) {
        if (target.kind !== 'name') continue
        const { text, span } = target.name
        if (!this.set.has(text)) this.set.set(text, span)
        if (statement.kind === 'assign') plainly.add(text)
        if (statement.kind === 'for') this.read.add(text)
      }
    }
    for (const name of this.set.keys()) if (!plainly.has(name)) this.takenAlong.add(name)
  }

  /** Whether a name is a variable here. */
  has(name: string): boolean {
    return this.set.has(name) || this.given.has(name)
  }

  names(): string[] {
    return [...new Set([...this.given, ...this.set.keys()])]
  }
}

/** The scope of a routine's own body; its scalar declarations are variables there. */
export function routineScope(tree: RoutineTree): VariableScope {
  const scalars = tree.declarations.flatMap(each =>
    'items' in each && each.kind !== 'work'
      ? each.items.filter(item => !item.length).map(item => item.name.text)
      : [],
  )
  return new VariableScope(undefined, tree.body, new Set(scalars))
}

export function procedureScope(procedure: ProcedureTree): VariableScope {
  const names = [...procedure.parameters, ...procedure.results].map(name => name.text)
  return new VariableScope(procedure, procedure.body, new Set(names))
}

/** Procedures among the declarations and at the top level of the body, in order. */
export function proceduresOf(tree: RoutineTree): ProcedureTree[] {
  return [...tree.declarations, ...tree.body].filter((each): each is ProcedureTree => each.kind === 'procedure')
}
