import type { SweepRecord } from './record'

/** How far a sweep is, in numbers. */
export interface Standing {
  readonly points: number
  /** Points with a result, run or not. */
  readonly settled: number
  readonly counted: number
  readonly tallies: number
  readonly refused: number
  readonly failed: number
  /** Points that are not run or went wrong, by reason, in the grid's order. */
  readonly reasons: readonly Reason[]
}

export interface Reason {
  readonly reason: string
  readonly line?: number
  readonly failed: boolean
  readonly count: number
}

export function standingOf(record: SweepRecord): Standing {
  let [counted, tallies, refused, failed] = [0, 0, 0, 0]
  const reasons = new Map<string, Reason>()
  for (const result of record.results) {
    if (!result) continue
    if (result.status === 'done') {
      counted += 1
      tallies += result.trials.length
      continue
    }
    const { reason, line, status } = result
    if (status === 'refused') refused += 1
    else failed += 1
    const known = reasons.get(reason)
    reasons.set(reason, {
      reason,
      ...(line !== undefined && { line }),
      failed: status === 'failed',
      count: (known?.count ?? 0) + 1,
    })
  }
  return {
    points: record.points.length,
    settled: counted + refused + failed,
    counted,
    tallies,
    refused,
    failed,
    reasons: [...reasons.values()],
  }
}

/** A text as a sentence: a capital first, unless a name of one letter stands there, and a full stop. */
export function sentenceOf(text: string): string {
  const first = /^\S\s/.test(text) ? text.slice(0, 1) : text.slice(0, 1).toUpperCase()
  return /[.!?]$/.test(text) ? first + text.slice(1) : `${first}${text.slice(1)}.`
}

/** Milliseconds as a reader takes them: `320 ms`, `2.4 s`, `3 min 5 s`. Time of this machine, never of the routine's. */
export function durationWords(milliseconds: number): string {
  if (milliseconds < 1000) return `${Math.round(milliseconds)} ms`
  const seconds = milliseconds / 1000
  if (seconds < 60) return `${seconds.toFixed(1)} s`
  return `${Math.floor(seconds / 60)} min ${Math.floor(seconds % 60)} s`
}
