import { type Count, weighTally } from '../../machine'
import type { ExpandedUse } from '../../machine/tally'
import type { Verdict } from '../../sweep/result'
import type { Reading, SweepRecord } from './record'

/** What stands beside a line of the draft. */
export type MarginCell =
  /**
   * `time` is the line's operations at their charges; `share` of the routine's time and `bar` of the costliest line's,
   * both from 0 to 1.
   */
  | {
      readonly line: number
      readonly kind: 'time'
      readonly time: Count
      readonly share: number
      readonly bar: number
      /** Operations a use of what stood in for a class that is off, on average; absent where nothing did. */
      readonly expanded?: number
    }
  | { readonly line: number; readonly kind: 'total'; readonly time: Count }
  /** Of a claim, check or need over all points so far. */
  | { readonly line: number; readonly kind: 'verdict'; readonly word: VerdictWord }

export type VerdictWord = 'holds' | 'so far' | 'broken' | 'undecided' | 'fails'

/** The margin of a sweep: counts at the reading, verdicts over all points. In order of lines, one cell a line. */
export function marginCells(record: SweepRecord, reading: Reading | undefined): MarginCell[] {
  const cells = new Map<number, MarginCell>()
  const result = reading && record.results[reading.point]
  const tally = result?.status === 'done' ? result.trials[reading?.trial ?? 0]?.tally : undefined
  if (tally) {
    const { time, byLine } = weighTally(tally, record.setting.charges)
    const most = Math.max(1, ...byLine.map(each => Number(each.time)))
    for (const { line, time: own } of byLine) {
      const share = time > 0 ? Number(own) / Number(time) : 0
      const uses = tally.expanded?.filter(use => use.line === line) ?? []
      const expanded = meanOf(uses)
      cells.set(line, {
        line,
        kind: 'time',
        time: own,
        share,
        bar: Number(own) / most,
        ...(expanded !== undefined && { expanded }),
      })
    }
    const { line } = record.program.routine.tree.span
    cells.set(line, { line, kind: 'total', time })
  }
  for (const [line, word] of verdictWords(record)) cells.set(line, { line, kind: 'verdict', word })
  return [...cells.values()].sort((a, b) => a.line - b.line)
}

function meanOf(uses: readonly ExpandedUse[]): number | undefined {
  const all = uses.reduce((sum, { uses: own }) => sum + own, 0)
  return all > 0 ? uses.reduce((sum, { operations }) => sum + operations, 0) / all : undefined
}

/** Worse comes later: a line shows the worst of its points. */
const ORDER: readonly Verdict['outcome'][] = ['holds', 'undecided', 'broken']

function verdictWords(record: SweepRecord): Map<number, VerdictWord> {
  const { needs } = record.program.routine
  const words = new Map<number, VerdictWord>()
  const worst = new Map<number, number>()
  const failing = new Set<number>()
  let counted = false
  for (const result of record.results) {
    if (result?.status === 'refused' && result.line !== undefined) failing.add(result.line)
    if (result?.status !== 'done') continue
    counted = true
    for (const { line, outcome } of result.verdicts)
      worst.set(line, Math.max(worst.get(line) ?? 0, ORDER.indexOf(outcome)))
  }
  const holds: VerdictWord = record.status === 'done' ? 'holds' : 'so far'
  for (const { span } of needs) {
    // A need that a point fails is no fault: that point is not run. It fails where no point is left.
    if (counted) words.set(span.line, holds)
    else if (failing.has(span.line)) words.set(span.line, 'fails')
  }
  for (const [line, place] of worst) {
    const outcome = ORDER[place]
    words.set(line, outcome === 'holds' || outcome === undefined ? holds : outcome)
  }
  return words
}
