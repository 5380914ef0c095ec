import type { Declaration, ProcedureTree, RoutineTree } from '../../grammar/tree'
import { namesInExact } from './exact-names'
import type { ArrayDeclaration, Routine } from './routine'

/**
 * Gathers a routine's declarations into tables: sizes are the free names in lengths of in, out and inout arrays; arrays
 * stand in memory order. Nothing is checked here.
 */
export function gatherDeclarations(tree: RoutineTree, text: string): Routine {
  const declarations = tree.declarations.filter((each): each is Declaration => each.kind !== 'procedure')
  const pick = <K extends Declaration['kind']>(kind: K) =>
    declarations.filter((each): each is Extract<Declaration, { kind: K }> => each.kind === kind)
  const lets = pick('let').map(({ name, value, span }) => ({ name: name.text, value, span }))
  const fixes = pick('fix').map(({ name, value, span }) => ({ name: name.text, value, span }))
  const known = new Set(['w', ...lets.map(each => each.name), ...fixes.map(each => each.name)])
  const sizes: string[] = []
  const scalars: Routine['scalars'][number][] = []
  const arrays: ArrayDeclaration[] = []
  for (const declaration of declarations) {
    if (declaration.kind === 'table' || declaration.kind === 'formula') arrays.push(tableOf(declaration))
    if (!('items' in declaration)) continue
    for (const { name, length, span } of declaration.items) {
      const role = declaration.kind
      if (!length) {
        if (role !== 'work') scalars.push({ name: name.text, role, span })
        continue
      }
      arrays.push({ name: name.text, role, length, span })
      if (role === 'work') continue
      for (const free of namesInExact(length)) {
        if (known.has(free)) continue
        known.add(free)
        sizes.push(free)
      }
    }
  }
  const procedures = [...tree.declarations, ...tree.body].filter(
    (each): each is ProcedureTree => each.kind === 'procedure',
  )
  const inMemory = (...roles: ArrayDeclaration['role'][]) => arrays.filter(array => roles.includes(array.role))
  return {
    name: tree.name.text,
    tree,
    text,
    sizes,
    arrays: [...inMemory('in'), ...inMemory('table'), ...inMemory('inout', 'out', 'work')],
    scalars,
    lets,
    fixes,
    needs: pick('need').map(({ condition, span }) => ({ condition, span })),
    feeds: [
      ...pick('feed-range').map(({ name, index, from, to, span }) => ({
        name: name.text,
        distinct: false,
        range: { ...(index ? { index } : {}), from, to },
        span,
      })),
      ...pick('feed-distinct').map(({ name, span }) => ({ name: name.text, distinct: true, span })),
    ].sort((a, b) => a.span.start - b.span.start),
    claims: pick('claim').map(({ measure, operator, bound, span }) => ({ measure, operator, bound, span })),
    checks: pick('check').map(({ condition, span }) => ({ condition, span })),
    procedures,
  }
}

function tableOf(declaration: Extract<Declaration, { kind: 'table' | 'formula' }>): ArrayDeclaration {
  const { name, span } = declaration
  if (declaration.kind === 'table') {
    const { length, values } = declaration
    return { name: name.text, role: 'table', length, table: { kind: 'list', values }, span }
  }
  const { index, from, to, value } = declaration
  // to - from + 1 elements.
  const one = { kind: 'number', numerator: 1n, denominator: 1n, span } as const
  const distance = { kind: 'binary', operator: '-', left: to, right: from, span } as const
  const length = { kind: 'binary', operator: '+', left: distance, right: one, span } as const
  return { name: name.text, role: 'table', length, table: { kind: 'formula', index, from, to, value }, span }
}
