import { type Count, weighTally } from '../../machine'
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
      cells.set(line, { line, kind: 'time', time: own, share, bar: Number(own) / most })
    }
    const { line } = record.program.routine.tree.span
    cells.set(line, { line, kind: 'total', time })
  }
  for (const [line, word] of verdictWords(record)) cells.set(line, { line, kind: 'verdict', word })
  return [...cells.values()].sort((a, b) => a.line - b.line)
}

function verdictWords(record: SweepRecord): Map<number, VerdictWord> {
  const { routine } = record.program
  const words = new Map<number, VerdictWord>()
  const holds: VerdictWord = record.status === 'done' ? 'holds' : 'so far'
  const counted = record.results.some(result => result?.status === 'done')
  for (const { span } of routine.needs) if (counted) words.set(span.line, holds)
  const verdicts = new Map<number, Verdict['outcome'][]>()
  for (const result of record.results) {
    if (result?.status === 'done')
      for (const { line, outcome } of result.verdicts) verdicts.set(line, [...(verdicts.get(line) ?? []), outcome])
    // A need that a point fails is no fault: that point is not run. Only where no point is left does it fail.
    else if (result?.status === 'refused' && result.line !== undefined && !counted)
      if (routine.needs.some(({ span }) => span.line === result.line)) words.set(result.line, 'fails')
  }
  for (const [line, outcomes] of verdicts) {
    if (outcomes.includes('broken')) words.set(line, 'broken')
    else words.set(line, outcomes.includes('undecided') ? 'undecided' : holds)
  }
  return words
}
