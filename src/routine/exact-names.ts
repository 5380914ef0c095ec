import type { Exact, ExactCondition } from '../../grammar/tree'

/** The scalar names that a condition reads, indices that it binds itself left out; arrays are not among them. */
export function namesInCondition(condition: ExactCondition): Set<string> {
  const found = new Set<string>()
  visitCondition(condition, new Set(), found)
  return found
}

/** The scalar names that an exact expression reads. */
export function namesInExact(expression: Exact): Set<string> {
  const found = new Set<string>()
  visitExact(expression, new Set(), found)
  return found
}

function visitCondition(condition: ExactCondition, bound: ReadonlySet<string>, found: Set<string>): void {
  switch (condition.kind) {
    case 'compare':
      visitExact(condition.left, bound, found)
      visitExact(condition.right, bound, found)
      return
    case 'and':
    case 'or':
      visitCondition(condition.left, bound, found)
      visitCondition(condition.right, bound, found)
      return
    case 'not':
      visitCondition(condition.operand, bound, found)
      return
    case 'all':
    case 'any':
      visitExact(condition.from, bound, found)
      visitExact(condition.to, bound, found)
      visitCondition(condition.body, new Set([...bound, condition.index.text]), found)
      return
    case 'sorted':
    case 'same':
      return
  }
}

function visitExact(expression: Exact, bound: ReadonlySet<string>, found: Set<string>): void {
  switch (expression.kind) {
    case 'name':
      if (!bound.has(expression.name.text)) found.add(expression.name.text)
      return
    case 'binary':
      visitExact(expression.left, bound, found)
      visitExact(expression.right, bound, found)
      return
    case 'negate':
      visitExact(expression.operand, bound, found)
      return
    case 'call':
      for (const argument of expression.arguments) visitExact(argument, bound, found)
      return
    case 'element':
      visitExact(expression.index, bound, found)
      return
    case 'sum':
      visitExact(expression.from, bound, found)
      visitExact(expression.to, bound, found)
      visitExact(expression.body, new Set([...bound, expression.index.text]), found)
      return
    case 'number':
    case 'old':
    case 'total':
      return
  }
}
