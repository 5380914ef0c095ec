import type { ProcedureTree, Statement } from '../../../grammar/tree'
import { nearestName } from '../names'
import { type Declared, locateMeaning } from './declared'
import { type Report, replaceWith } from './report'

type Call = Extract<Statement, { kind: 'call' }>

/** Checks that a call names a procedure, and gives and takes as many words as it has parameters and results. */
export function checkCall(call: Call, declared: Declared, report: Report): void {
  const { text, span } = call.procedure
  const meaning = declared.get(text)
  if (meaning?.kind === 'procedure') {
    checkWords(call, meaning.tree, report)
    return
  }
  if (meaning) {
    report.error({
      span,
      message: `\`${text}\` is ${locateMeaning(meaning)}, and no procedure.`,
      remedy:
        meaning.kind === 'array'
          ? `Write \`${text}[i]\` for one of its words.`
          : 'Call a procedure, or use an operator.',
      cause: `call of ${text}`,
    })
    return
  }
  if (report.mayBeLost(text)) return
  const near = nearestName(
    text,
    declared.names(({ kind }) => kind === 'procedure'),
  )
  report.error({
    span,
    message: `No procedure \`${text}\` is defined.`,
    remedy: near
      ? `Write \`${near}\` if that is meant.`
      : `Define it before \`begin\`: \`${definition(call)} ... end\`.`,
    fix: near ? replaceWith(near, span) : undefined,
    cause: `procedure ${text}`,
  })
}

/** The head of a procedure that would fit a call. */
function definition({ procedure, results, arguments: given }: Call): string {
  const names = (letters: string, count: number) =>
    Array.from({ length: count }, (_, at) => (at < letters.length ? letters[at]! : `${letters[0]}${at}`)).join(', ')
  const head = `procedure ${procedure.text}(${names('xyz', given.length)})`
  return results.length > 0 ? `${head} -> ${names('uv', results.length)}` : head
}

function checkWords(call: Call, { name, parameters, results }: ProcedureTree, report: Report): void {
  const takes = parameters.map(parameter => parameter.text).join(', ')
  const gives = results.map(result => result.text).join(', ')
  if (call.arguments.length !== parameters.length)
    report.error({
      span: call.span,
      message: `\`${name.text}\` takes ${count(parameters.length, 'argument')}${takes && ` (${takes})`}, and is given ${call.arguments.length}.`,
      remedy: `Write \`${name.text}(${takes})\` with one word for each.`,
      path: [{ span: name.span, note: 'defined here' }],
    })
  if (call.results.length === results.length) return
  report.error({
    span: call.span,
    message: `\`${name.text}\` gives ${count(results.length, 'result')}${gives && ` (${gives})`}, and ${call.results.length === 1 ? '1 is' : `${call.results.length} are`} taken.`,
    remedy: gives
      ? `Write \`${gives} <- ${name.text}(${takes})\`.`
      : `Write \`${name.text}(${takes})\` alone, or let it return a word: \`procedure ${name.text}(${takes}) -> u\`.`,
    path: [{ span: name.span, note: 'defined here' }],
  })
}

function count(number: number, thing: string): string {
  return `${number === 0 ? 'no' : number} ${thing}${number === 1 ? '' : 's'}`
}
