import type { Diagnostic } from '../../grammar/diagnostic'
import type { Span } from '../../grammar/span'
import type { Name, ProcedureTree, Statement } from '../../grammar/tree'
import { findUnsetReads } from './assign'
import type { Block, BlockProcedure, Constant, Operand, Program } from './block'
import { BlockBuilder, ConstantPool } from './block-builder'
import { markCheckpoints } from './checkpoint'
import { type ConstantNames, ExpressionLowering } from './lower-expression'
import { StatementLowering } from './lower-statement'
import type { Routine } from './routine'

/**
 * Lowers a checked routine to basic blocks of unit operations. This and its two companions (lower-expression,
 * lower-statement) are the only places that know what each form costs. A variable that may be read before it is set is an
 * error, with the path that leads there; then there is no program.
 */
export function lowerRoutine(routine: Routine): { program?: Program; diagnostics: Diagnostic[] } {
  const pool = new ConstantPool()
  const names = constantNames(routine)
  const procedureNumbers = new Map(routine.procedures.map((procedure, place) => [procedure.name.text, place + 1]))
  const blocks: Block[] = []
  const procedures: BlockProcedure[] = []
  const lower = (scope: Scope) => {
    const closed = lowerScope(scope, pool, names, procedureNumbers, blocks.length)
    blocks.push(...closed.blocks)
    procedures.push(closed.procedure)
    return closed.variable
  }
  const variable = lower(routineScope(routine))
  for (const procedure of routine.procedures) lower(procedureScope(procedure))
  const results = new Map(
    routine.scalars.filter(scalar => scalar.role !== 'in').map(scalar => [scalar.name, variable(scalar.name)]),
  )
  const program: Program = {
    routine,
    blocks: markCheckpoints(blocks, procedures),
    procedures,
    constants: pool.constants,
    results,
  }
  const diagnostics = findUnsetReads(program)
  return diagnostics.length > 0 ? { diagnostics } : { program, diagnostics }
}

/** What differs between the routine's own body and a procedure. */
interface Scope {
  readonly name: string
  readonly body: readonly Statement[]
  readonly parameters: readonly string[]
  /** Variables that come next, in this order, before those of the body. */
  readonly declared: readonly string[]
  /** Of a procedure: the variables that a bare return gives. */
  readonly results: readonly string[] | undefined
  readonly span: Span
  readonly end: Span
}

function routineScope(routine: Routine): Scope {
  const named = (wanted: (role: 'in' | 'out' | 'inout') => boolean) =>
    routine.scalars.filter(scalar => wanted(scalar.role)).map(scalar => scalar.name)
  return {
    name: '',
    body: routine.tree.body,
    parameters: named(role => role !== 'out'),
    declared: named(role => role === 'out'),
    results: undefined,
    span: routine.tree.name.span,
    end: routine.tree.end,
  }
}

function procedureScope(procedure: ProcedureTree): Scope {
  const parameters = procedure.parameters.map(name => name.text)
  const results = procedure.results.map(name => name.text)
  return {
    name: procedure.name.text,
    body: procedure.body,
    parameters,
    declared: results.filter(name => !parameters.includes(name)),
    results,
    span: procedure.name.span,
    end: procedure.end,
  }
}

function lowerScope(
  scope: Scope,
  pool: ConstantPool,
  names: ConstantNames,
  procedureNumbers: ReadonlyMap<string, number>,
  first: number,
) {
  const builder = new BlockBuilder(scope.span.line)
  for (const name of [...scope.parameters, ...scope.declared]) builder.variable(name)
  const results = scope.results?.map((name): Operand => ({ kind: 'variable', variable: builder.variable(name) }))
  const expressions = new ExpressionLowering(builder, pool, names)
  const statements = new StatementLowering(builder, expressions, pool, names, procedureNumbers, results)
  statements.lowerBody(scope.body)
  statements.leave(scope.end)
  const { blocks, procedure } = builder.close(
    {
      name: scope.name,
      parameters: scope.parameters.length,
      results: results?.length ?? 0,
      frame: 0,
      span: scope.span,
    },
    first,
  )
  const locals = procedure.variables.filter(variable => !variable.hidden).length
  const frame = scope.results ? locals + RETURN_ADDRESS_WORDS : 0
  return { blocks, procedure: { ...procedure, frame }, variable: (name: string) => builder.variable(name) }
}

const RETURN_ADDRESS_WORDS = 1

function constantNames(routine: Routine): ConstantNames {
  const arrays = new Map(routine.arrays.map((array, place) => [array.name, place]))
  const kinds = new Map<string, 'size' | 'let' | 'fix'>()
  for (const size of routine.sizes) kinds.set(size, 'size')
  for (const { name } of routine.lets) kinds.set(name, 'let')
  for (const { name } of routine.fixes) kinds.set(name, 'fix')
  return {
    array: name => arrays.get(name),
    constant(name: Name): Constant | undefined {
      if (name.text === 'w') return { kind: 'width' }
      const kind = kinds.get(name.text)
      return kind && { kind, name: name.text, span: name.span }
    },
  }
}
