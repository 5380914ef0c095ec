import type { Diagnostic } from '../../../grammar/diagnostic'
import type { Span } from '../../../grammar/span'
import type { Name, ProcedureTree, RoutineTree, Statement } from '../../../grammar/tree'
import type { Routine } from '../routine'
import { BodyCheck } from './body'
import { DeclarationCheck } from './declarations'
import { Declared, locateMeaning } from './declared'
import { Declaring } from './declaring'
import { ExactCheck } from './exact'
import { FlowCheck } from './flow'
import { JumpCheck } from './jumps'
import { Missing } from './missing'
import { Report } from './report'
import { procedureScope, proceduresOf, routineScope, type VariableScope } from './scope'

/**
 * Checks a routine's names, kinds and forms, everything at once, and gives it as a checked routine where no error is
 * among what was found. `broken` are the places of the parser's errors: what may have stood there is not reported as
 * missing. Whether variables are set before they are read is for `lowerRoutine` to find.
 */
export function checkRoutine(
  tree: RoutineTree,
  text: string,
  broken: readonly Span[] = [],
): { routine?: Routine; diagnostics: Diagnostic[] } {
  const report = new Report(text, broken)
  const declared = new Declared()
  const declaring = new Declaring(tree, text)
  const procedures = proceduresOf(tree)
  const own = routineScope(tree)
  const scopes = [own, ...procedures.map(procedureScope)]
  const missing = new Missing(report, declared, declaring, scopes)
  const exact = new ExactCheck(report, declared, declaring, missing, own)

  const declarations = new DeclarationCheck(tree, report, declared, declaring, scopes)
  declarations.enterNames()
  const found = declarations.checkExpressions(exact)
  for (const procedure of procedures) checkHead(procedure, declared, report)

  const called = new Map<VariableScope, ReadonlySet<string>>()
  const jumps = scopes.map(scope => new JumpCheck(scope, report, declared))
  for (const [at, scope] of scopes.entries()) {
    const body = new BodyCheck(scope, report, declared, declaring, missing, exact)
    body.statements(scope.body)
    called.set(scope, body.called)
    jumps[at]!.check(jumps)
    new FlowCheck(report, jumps[at]!).follow(scope.body, true)
    warnOfUnread(scope, report)
  }
  missing.tell()
  warnOfUncalled(procedures, called, report)
  if (!tree.body.some(isInstruction) && broken.length === 0) refuseEmpty(tree, report)

  const diagnostics = report.diagnostics()
  if (report.hasErrors) return { diagnostics }
  return { routine: { name: tree.name.text, tree, text, ...found }, diagnostics }
}

function isInstruction(statement: Statement): boolean {
  return statement.kind !== 'label' && statement.kind !== 'procedure'
}

function refuseEmpty(tree: RoutineTree, report: Report): void {
  report.error({
    span: tree.name.span,
    message: `The routine \`${tree.name.text}\` has no instruction.`,
    remedy: 'Write its instructions between `begin` and `end`; `halt` alone will do.',
  })
}

/** Parameters and results hide nothing that the procedure sees. */
function checkHead({ name, parameters, results, body }: ProcedureTree, declared: Declared, report: Report): void {
  for (const list of [parameters, results]) {
    const seen = new Set<string>()
    for (const each of list) {
      if (seen.has(each.text))
        report.error({
          span: each.span,
          message: `\`${each.text}\` stands twice in the head of \`${name.text}\`.`,
          remedy: 'Give one of the two another name.',
        })
      seen.add(each.text)
      refuseHiding(each, name, declared, report)
    }
  }
  for (const statement of body) {
    if (statement.kind !== 'procedure') continue
    report.error({
      span: statement.name.span,
      message: `The procedure \`${statement.name.text}\` stands inside \`${name.text}\`.`,
      remedy: 'Move it to the declarations, before `begin`.',
    })
  }
}

function refuseHiding({ text, span }: Name, procedure: Name, declared: Declared, report: Report): void {
  const meaning = declared.get(text)
  if (!meaning || meaning.kind === 'scalar') return
  report.error({
    span,
    message: `\`${text}\` is ${locateMeaning(meaning)}, which \`${procedure.text}\` sees by that name.`,
    remedy:
      meaning.kind === 'array'
        ? `Leave it out of the head and use \`${text}[i]\`; or give the parameter another name and pass \`addr(${text})\`.`
        : 'Leave it out of the head, or give it another name.',
  })
}

function warnOfUnread(scope: VariableScope, report: Report): void {
  for (const [name, span] of scope.set) {
    if (scope.given.has(name) || scope.read.has(name) || scope.takenAlong.has(name)) continue
    report.warn({
      span,
      message: `\`${name}\` is set and never read.`,
      remedy: scope.procedure
        ? `Delete the line, or return it: \`procedure ${scope.procedure.name.text}(...) -> ${name}\`.`
        : `Delete the line, or declare it as a result: \`out ${name}\`.`,
    })
  }
}

/** Procedures that no chain of calls from the routine's own body comes to. */
function warnOfUncalled(
  procedures: readonly ProcedureTree[],
  called: ReadonlyMap<VariableScope, ReadonlySet<string>>,
  report: Report,
): void {
  const reached = new Set<string>()
  const waiting: (string | undefined)[] = [undefined]
  for (let at = waiting.pop(), more = true; more; more = waiting.length > 0, at = waiting.pop()) {
    for (const [scope, names] of called) {
      if (scope.procedure?.name.text !== at) continue
      for (const name of names) {
        if (reached.has(name)) continue
        reached.add(name)
        waiting.push(name)
      }
    }
  }
  for (const { name } of procedures) {
    if (reached.has(name.text)) continue
    report.warn({
      span: name.span,
      message: `The procedure \`${name.text}\` is never called.`,
      remedy: 'Call it, or delete it.',
    })
  }
}
