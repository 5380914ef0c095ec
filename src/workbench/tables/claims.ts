import type { GridPoint, PointResult, Verdict } from '../../sweep/result'
import { pointWords, SET_WORDS } from '../store/point-words'
import type { SweepRecord } from '../store/record'

type Done = Extract<PointResult, { status: 'done' }>

/** What the whole sweep says of one claim or check. */
export interface Finding {
  readonly key: string
  readonly line: number
  /** As the author wrote it. */
  readonly text: string
  readonly outcome: 'holds' | 'broken' | 'undecided' | 'not judged'
  /** The first point that it fails at (smallest n, then w), or that comes nearest to it; with the trial to read. */
  readonly at?: { readonly point: GridPoint; readonly trial: number }
  /** What stands before and after the name of that point. */
  readonly before: string
  readonly after: string
}

/** The findings on every claim and check, in the order of their lines. */
export function findClaims(record: SweepRecord): Finding[] {
  const { claims, checks, text } = record.program.routine
  const done = record.results.filter((result): result is Done => result?.status === 'done')
  const of = (kind: 'claim' | 'check', place: number, span: { start: number; end: number; line: number }) => ({
    key: `${kind} ${place}`,
    line: span.line,
    text: text.slice(span.start, span.end).replace(/\s+/g, ' '),
    ...judge(
      record,
      done.flatMap(result => {
        const verdict = result.verdicts.find(
          each => (each.kind === 'check') === (kind === 'check') && each.place === place,
        )
        return verdict ? [{ result, verdict }] : []
      }),
    ),
  })
  return [
    ...claims.map((claim, place) => of('claim', place, claim.span)),
    ...checks.map((check, place) => of('check', place, check.span)),
  ].sort((a, b) => a.line - b.line)
}

interface Judged {
  readonly result: Done
  readonly verdict: Verdict
}

function judge(record: SweepRecord, judged: readonly Judged[]): Omit<Finding, 'key' | 'line' | 'text'> {
  const soFar = record.status === 'running' ? ' so far' : ''
  if (judged.length === 0) return { outcome: 'not judged', before: 'No point is counted.', after: '' }
  const broken = judged.filter(({ verdict }) => verdict.outcome === 'broken').sort(byPlace)
  const [first] = broken
  if (first) {
    return {
      outcome: 'broken',
      at: placeOf(first),
      before: 'First fails at',
      after: `${sides(first.verdict)}. ${howMany(record, broken, judged.length)}${soFar}.`,
    }
  }
  const undecided = judged.filter(({ verdict }) => verdict.outcome === 'undecided').sort(byPlace)
  if (undecided[0]) {
    const { reason = 'the reason is not known' } = undecided[0].verdict
    return { outcome: 'undecided', at: placeOf(undecided[0]), before: 'Undecided at', after: `: ${plain(reason)}.` }
  }
  const count = judged.length
  const points = `${count} ${count === 1 ? 'point' : 'points'}`
  if (judged[0]!.verdict.kind === 'check') {
    const tallies = judged.reduce((sum, { result }) => sum + result.trials.length, 0)
    return { outcome: 'holds', before: `In all ${tallies} tallies of ${points}${soFar}.`, after: '' }
  }
  const nearest = judged.reduce((most, each) =>
    (each.verdict.ratio ?? 0) > (most.verdict.ratio ?? 0) ? each : most,
  )
  return {
    outcome: 'holds',
    at: placeOf(nearest),
    before: `At ${points}${soFar}; nearest at`,
    after: `${sides(nearest.verdict)}.`,
  }
}

function byPlace(a: Judged, b: Judged): number {
  const [left, right] = [a.result.point, b.result.point]
  return left.n - right.n || left.width - right.width || left.index - right.index
}

function placeOf({ result, verdict }: Judged): { point: GridPoint; trial: number } {
  return { point: result.point, trial: verdict.trial ?? 0 }
}

/** Both sides in numbers: `: 4367 against 4368`; nothing for a check. */
function sides({ count, bound }: Verdict): string {
  return count === undefined || bound === undefined ? '' : `: ${count} against ${bound}`
}

function howMany(record: SweepRecord, broken: readonly Judged[], all: number): string {
  const sets = new Set(broken.map(({ result }) => result.point.set))
  const [only] = sets
  const where = sets.size === 1 && only && record.setting.sets.length > 1 ? `, all ${SET_WORDS[only]}` : ''
  const fail = broken.length === 1 ? '1 point fails' : `${broken.length} points fail`
  return `${fail} of ${all}${where}`
}

function plain(reason: string): string {
  return reason.replace(/\.$/, '')
}

/** The head's sentence: how many hold. */
export function summariseClaims(findings: readonly Finding[], running: boolean): string {
  if (findings.length === 0) return 'The draft makes none.'
  const count = (outcome: Finding['outcome']) => findings.filter(finding => finding.outcome === outcome).length
  const parts = [
    [count('holds'), 'hold', 'holds'],
    [count('broken'), 'are broken', 'is broken'],
    [count('undecided'), 'are undecided', 'is undecided'],
    [count('not judged'), 'are not judged', 'is not judged'],
  ] as const
  const said = parts
    .filter(([number]) => number > 0)
    .map(([number, many, one]) => `${number} ${number === 1 ? one : many}`)
  return `${said.join(', ')}${running ? ' so far' : ''}.`
}

/** A point in words, as the sentences name it. */
export const findingPlace = pointWords
