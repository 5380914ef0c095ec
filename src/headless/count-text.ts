import { weighTally } from '../machine'
import { OPERATION_CLASSES } from '../routine'
import { printCharges } from '../sweep'
import { type CountReport, outputsOf } from './count-json'
import { notesOf } from './notes'
import { type Column, groupDigits, layTable, sayFigures } from './table'

/** Words of an array that are shown; the JSON has them all. */
const SHOWN_WORDS = 8
/** Digits of a word that are shown whole. */
const SHOWN_DIGITS = 60

/** What must stand wherever counts could be taken for something else. */
export const DISCLAIMER =
  'Counts are unit-cost operations of a word-RAM at the charges given: not cycles, not seconds.'

/** The report for readers. */
export function writeCountText(report: CountReport): string {
  const { binding, setting, point, fed } = report
  const { name } = binding.program.routine
  const at = [
    ...Object.entries(point.sizes).map(([size, value]) => `${size} = ${groupDigits(value)}`),
    `w = ${point.width}`,
  ]
  const lets = binding.program.routine.lets.map(known => `${known.name} = ${binding.names.get(known.name)}`)
  const head = [
    `${name}: ${[...at, ...lets].join(', ')}`,
    `instruction set ${point.set}, charges ${printCharges(setting.charges)}, ${fed}`,
  ]
  const parts = [
    head.join('\n'),
    byClass(report),
    byLine(report),
    space(report),
    outputs(report),
    verdicts(report),
    notes(report),
  ]
  return [...parts.filter(part => part !== ''), DISCLAIMER].join('\n\n')
}

function byClass({ tally, setting: { charges } }: CountReport): string {
  const unit = printCharges(charges) === 'unit'
  const counts = OPERATION_CLASSES.map(name => ({
    name: name as string,
    count: tally.byClass[name],
    charge: charges[name],
  }))
  if (charges.index > 0) counts.push({ name: 'index', count: tally.indexed, charge: charges.index })
  const used = counts.filter(({ count }) => count > 0)
  const { time } = weighTally(tally, charges)
  if (unit) {
    const columns: Column[] = [
      { title: 'class', align: 'left' },
      { title: 'operations', align: 'right' },
    ]
    const rows = used.map(({ name, count }) => [name, groupDigits(count)])
    return layTable(columns, [...rows, ['time', groupDigits(time)]])
  }
  const columns: Column[] = [
    { title: 'class', align: 'left' },
    { title: 'operations', align: 'right' },
    { title: 'charge', align: 'right' },
    { title: 'time', align: 'right' },
  ]
  const rows = used.map(({ name, count, charge }) => [
    name,
    groupDigits(count),
    groupDigits(charge),
    groupDigits(BigInt(count) * BigInt(charge)),
  ])
  return layTable(columns, [...rows, ['time', '', '', groupDigits(time)]])
}

/** Every line from the routine's first to its last, with what it did beside it. */
function byLine({ binding, tally, setting: { charges } }: CountReport): string {
  const { text, tree } = binding.program.routine
  const lines = text.split(/\r\n|\r|\n/)
  const counted = new Map(weighTally(tally, charges).byLine.map(line => [line.line, line]))
  const unit = printCharges(charges) === 'unit'
  const columns: Column[] = [
    { title: 'line', align: 'right' },
    { title: 'operations', align: 'right' },
    ...(unit ? [] : [{ title: 'time', align: 'right' } as const]),
    { title: 'source', align: 'left' },
  ]
  const rows: string[][] = []
  for (let line = tree.span.line; line <= tree.end.line; line++) {
    const own = counted.get(line)
    const figures = [own?.count, ...(unit ? [] : [own?.time])].map(figure =>
      figure === undefined ? '' : groupDigits(figure),
    )
    rows.push([String(line), ...figures, (lines[line - 1] ?? '').replaceAll('\t', '  ')])
  }
  return layTable(columns, rows)
}

function space({ tally }: CountReport): string {
  const columns: Column[] = [
    { title: 'space', align: 'left' },
    { title: 'words', align: 'right' },
  ]
  return layTable(
    columns,
    Object.entries(tally.space).map(([kind, words]) => [kind, groupDigits(words)]),
  )
}

function outputs({ binding, result }: CountReport): string {
  const shown = Object.entries(outputsOf(binding, result)).map(([name, value]) => {
    if (typeof value === 'string') return `${name} = ${shorten(value)}`
    const first = value.slice(0, SHOWN_WORDS).map(shorten).join(', ')
    const rest = value.length > SHOWN_WORDS ? `, ... (${groupDigits(value.length)} words)` : ''
    return `${name} = ${first}${rest}`
  })
  return shown.join('\n')
}

function shorten(digits: string): string {
  return digits.length <= SHOWN_DIGITS ? digits : `${digits.slice(0, SHOWN_DIGITS)}... (${digits.length} digits)`
}

function verdicts({ binding, verdicts }: CountReport): string {
  const { claims, checks, text } = binding.program.routine
  const rows = verdicts.map(({ kind, place, line, outcome, count, bound, reason }) => {
    const { span } = (kind === 'check' ? checks : claims)[place]!
    const source = text.slice(span.start, span.end).replace(/\s+/g, ' ')
    const figures = count === undefined || bound === undefined ? '' : sayFigures(count, bound)
    return [String(line), outcome, source, reason ?? figures]
  })
  if (rows.length === 0) return ''
  const columns: Column[] = [
    { title: 'line', align: 'right' },
    { title: 'verdict', align: 'left' },
    { title: 'claim or check', align: 'left' },
    { title: '', align: 'left' },
  ]
  return layTable(columns, rows)
}

function notes({ binding, tally }: CountReport): string {
  return notesOf(binding, tally)
    .map(({ line, message }) => `line ${line}: ${message}`)
    .join('\n')
}
