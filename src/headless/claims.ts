import type { PointResult, Verdict } from '../sweep'
import { DISCLAIMER } from './count-text'
import type { Arguments, Flag } from './flags'
import { sayPlace, saySetting } from './say'
import { GRID_FLAGS } from './setting-flags'
import { readSource } from './source'
import { complainOf, sweepSource } from './sweep'
import { type Column, layTable, sayFigures } from './table'
import { type Exit, misuse, type Terminal } from './terminal'

export const CLAIMS_FLAGS: readonly Flag[] = GRID_FLAGS

type Done = Extract<PointResult, { status: 'done' }>

/** `claims`: every claim and check over a grid, and where each first fails. */
export async function claims(given: Arguments, terminal: Terminal): Promise<Exit> {
  const source = await readSource(terminal, 'claims', given.files, given.value('routine'))
  const { routine } = source.program
  if (routine.claims.length + routine.checks.length === 0)
    throw misuse(`${routine.name} has no claim and no check`, 'add a line such as: claim time <= 7*n + 5')
  const result = await sweepSource(given, terminal, source)
  const done = result.points.filter((point): point is Done => point.status === 'done')
  // Smallest sizes first, then widths: the plainest place to look at.
  const inOrder = [...done].sort((a, b) => a.point.n - b.point.n || a.point.width - b.point.width)
  const rows = (done[0]?.verdicts ?? []).map(({ kind, place, line }, at) => {
    const { span } = (kind === 'check' ? routine.checks : routine.claims)[place]!
    const text = routine.text.slice(span.start, span.end).replace(/\s+/g, ' ')
    return [String(line), text, ...judge(inOrder, at)]
  })
  const columns: Column[] = [
    { title: 'line', align: 'right' },
    { title: 'claim or check', align: 'left' },
    { title: 'verdict', align: 'left' },
    { title: '', align: 'left' },
  ]
  const refused = result.points.filter(point => point.status === 'refused')
  const notRun = refused.map(({ point, reason }) => `not run: ${sayPlace(point)}: ${reason}`)
  terminal.print(
    [saySetting(result.routine, result.setting), layTable(columns, rows), notRun.join('\n'), DISCLAIMER]
      .filter(part => part !== '')
      .join('\n\n'),
  )
  return complainOf(terminal, source, {
    ...result,
    points: [...result.points.filter(p => p.status !== 'done'), ...inOrder],
  })
}

/** The verdict over all points, and the first that says otherwise. */
function judge(points: readonly Done[], at: number): [string, string] {
  for (const outcome of ['broken', 'undecided'] as const) {
    const bad = points.filter(({ verdicts }) => verdicts[at]?.outcome === outcome)
    const [first] = bad
    if (first) {
      const where = `at ${bad.length} of ${points.length} points, first ${sayPlace(first.point)}`
      return [outcome, `${where}${sayVerdict(first.verdicts[at]!, first.trials.length)}`]
    }
  }
  return ['holds', `at all ${points.length} points`]
}

function sayVerdict({ count, bound, trial, reason }: Verdict, trials: number): string {
  const figures = count === undefined || bound === undefined ? '' : `: ${sayFigures(count, bound)}`
  const which = trial === undefined || trials === 1 ? '' : ` (trial ${trial + 1})`
  return `${figures}${which}${reason === undefined ? '' : `: ${reason}`}`
}
