import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest'
import { readProgram } from '../../src/routine'
import { gridPoints, runPoint } from '../../src/sweep'
import { checkDraft } from '../../src/workbench/store/checking'
import { DEMO_DRAFT, DEMO_SETTING } from '../../src/workbench/store/demo'
import { KEPT_KEY, readKept } from '../../src/workbench/store/keeping'
import { marginCells } from '../../src/workbench/store/margin'
import { pointOutcome } from '../../src/workbench/store/record'
import { standingOf } from '../../src/workbench/store/standing'
import { isStale } from '../../src/workbench/store/state'
import { obstacle } from '../../src/workbench/store/sweeping'
import { createWorkbench } from '../../src/workbench/store/workbench'
import type { SweepRequest } from '../../src/workbench/sweeper/messages'
import type { SweepListener } from '../../src/workbench/sweeper/sweeper'
import { memoryDrawer } from './memory-drawer'

const SUM = `routine sum
  in    a[n]
  out   x
  claim time <= 5*n + 30
  check x = sum(a) mod 2^w
begin
  x <- 0
  i <- 0
  while i < n
    x <- x + a[i]
    i <- i + 1
  end
end
`

/** Runs what it is asked for only when told to, by the interpreter. */
function handSweeper() {
  let asked: { request: SweepRequest; listener: SweepListener } | undefined
  return {
    start: (request: SweepRequest, listener: SweepListener) => {
      asked = { request, listener }
    },
    cancel: vi.fn(() => asked?.listener.ended('cancelled')),
    /** Runs the first so many points. */
    async run(points = Number.POSITIVE_INFINITY) {
      const { request, listener } = asked!
      const program = readProgram(request.text, request.routine).program!
      for (const point of gridPoints(request.setting, program).slice(0, points)) {
        const result = await runPoint(program, request.setting, point, { way: 'reference' })
        listener.results([result!])
      }
    },
    end: () => asked?.listener.ended('done'),
  }
}

function setUp(text = SUM, entries: Readonly<Record<string, string>> = {}) {
  const sweeper = handSweeper()
  const drawer = memoryDrawer(entries)
  const download = vi.fn<(file: string, text: string) => void>()
  const workbench = createWorkbench({
    sweeper,
    drawer,
    systemIsDark: false,
    now: () => Date.now(),
    check: checkDraft,
    download,
  })
  const { store } = workbench
  if (text !== DEMO_DRAFT.text && Object.keys(entries).length === 0) {
    workbench.open('sum.tally', text)
    workbench.takeSetting({ ...DEMO_SETTING, first: '4, 8', trials: '2' })
  }
  return { workbench, sweeper, drawer, download, state: store.getState }
}

beforeEach(() => void vi.useFakeTimers())
afterEach(() => void vi.useRealTimers())

describe('a sweep', () => {
  test('fills its grid as results come, and reads the largest point at its end', async () => {
    const { workbench, sweeper, state } = setUp()
    expect(workbench.sweep()).toBe(true)
    expect(state().record?.points).toHaveLength(12)
    await sweeper.run(3)
    expect(standingOf(state().record!)).toMatchObject({ points: 12, settled: 3, counted: 3, tallies: 6 })
    expect(state().reading).toEqual({ point: 0, trial: 0 })
    await sweeper.run()
    sweeper.end()
    expect(state().record?.status).toBe('done')
    expect(state().record?.results.map(pointOutcome)).toEqual(new Array(12).fill('holds'))
    expect(state().reading).toEqual({ point: 1, trial: 0 })
  })

  test('reads the first broken point by size, then by width', async () => {
    const { workbench, sweeper, state } = setUp(SUM.replace('5*n + 30', '5*w + 5*n - 120'))
    workbench.sweep()
    await sweeper.run()
    sweeper.end()
    const { record, reading } = state()
    expect(record?.points[reading!.point]).toMatchObject({ n: 4, width: 16, set: 'full' })
    expect(pointOutcome(record?.results[reading!.point])).toBe('broken')
  })

  test('leaves a reading that the user picked where it is, in the next sweep too', async () => {
    const { workbench, sweeper, state } = setUp()
    workbench.sweep()
    await sweeper.run()
    workbench.read({ point: 4, trial: 1 })
    sweeper.end()
    expect(state().reading).toEqual({ point: 4, trial: 1 })
    workbench.takeSetting({ ...state().settingText, first: '2, 4, 8' })
    workbench.sweep()
    expect(state().reading).toEqual({ point: 7, trial: 1 })
    expect(state().record?.points[7]).toMatchObject({ n: 4, width: 64 })
  })

  test('keeps its points where it is cancelled', async () => {
    const { workbench, sweeper, state } = setUp()
    workbench.sweep()
    await sweeper.run(5)
    workbench.cancel()
    expect(state().record?.status).toBe('cancelled')
    expect(standingOf(state().record!).counted).toBe(5)
  })

  test('has no say any more once the next has begun', async () => {
    const { workbench, sweeper, state } = setUp()
    workbench.sweep()
    const first = sweeper.run
    workbench.sweep()
    expect(state().record?.number).toBe(2)
    await first(2)
    expect(standingOf(state().record!).settled).toBe(2)
  })

  test('is not begun where something stands in the way, which is named', () => {
    const { workbench, state } = setUp()
    workbench.write(SUM.replace('x + a[i]', 'x ^ a[i]'))
    workbench.checkNow()
    expect(workbench.sweep()).toBe(false)
    expect(obstacle(state())).toEqual({ text: 'The draft stops at line 10.', line: 10 })
    workbench.write(SUM)
    workbench.checkNow()
    expect(obstacle(state())).toBeUndefined()
    workbench.takeSetting({ ...state().settingText, widths: '1' })
    expect(workbench.sweep()).toBe(false)
    expect(obstacle(state())?.text).toMatch(/^The setting stops at widths/)
  })
})

describe('results', () => {
  async function swept() {
    const set = setUp()
    set.workbench.sweep()
    await set.sweeper.run()
    set.sweeper.end()
    return set
  }

  test('are stale from the first change of draft or setting on, until that is taken back', async () => {
    const { workbench, state } = await swept()
    expect(isStale(state())).toBe(false)
    workbench.write(`${SUM}# more\n`)
    expect(isStale(state())).toBe(true)
    workbench.write(SUM)
    expect(isStale(state())).toBe(false)
    const { settingText } = state()
    workbench.takeSetting({ ...settingText, trials: '3' })
    expect(isStale(state())).toBe(true)
    workbench.takeSetting({ ...settingText, first: '2^2..2^3' })
    expect(isStale(state())).toBe(false)
  })

  test('are weighed again, and not stale, where the charges alone change', async () => {
    const { workbench, state } = await swept()
    const before = state().record!
    workbench.takeSetting({ ...state().settingText, charges: 'unit, add = 100' })
    const after = state().record!
    expect(isStale(state())).toBe(false)
    expect(after.results.map(pointOutcome)).toEqual(new Array(12).fill('broken'))
    expect(after.results.map(result => result?.status === 'done' && result.trials)).toEqual(
      before.results.map(result => result?.status === 'done' && result.trials),
    )
    workbench.takeSetting({ ...state().settingText, charges: 'unit' })
    expect(state().record?.results).toEqual(before.results)
  })

  test('that come after such a change are weighed as they come', async () => {
    const { workbench, sweeper, state } = setUp()
    workbench.sweep()
    workbench.takeSetting({ ...state().settingText, charges: 'unit, add = 100' })
    await sweeper.run(2)
    expect(state().record?.results.slice(0, 2).map(pointOutcome)).toEqual(['broken', 'broken'])
  })

  test('stand in the margin: times that add up to the total, verdicts on their lines', async () => {
    const { state } = await swept()
    const cells = marginCells(state().record!, { point: 1, trial: 0 })
    const total = cells.find(cell => cell.kind === 'total')
    const times = cells.flatMap(cell => (cell.kind === 'time' ? [Number(cell.time)] : []))
    expect(total).toMatchObject({ line: 1, time: times.reduce((sum, time) => sum + time) })
    expect(cells.filter(cell => cell.kind === 'verdict')).toEqual([
      { line: 4, kind: 'verdict', word: 'holds' },
      { line: 5, kind: 'verdict', word: 'holds' },
    ])
    expect(cells.some(cell => cell.kind === 'time' && cell.expanded !== undefined)).toBe(false)
    // A while tested nine times, its body run eight: 9 compares and 8 jumps.
    expect(cells.find(({ line }) => line === 9)).toMatchObject({ time: 17 })
  })
})

test('the margin says where a class that is off was expanded, and at what mean cost', async () => {
  const { workbench, sweeper, state } = setUp(SUM.replace('x + a[i]', 'x + a[i] * n'))
  workbench.takeSetting({ ...state().settingText, sets: ['full', 'no-multiply'], widths: '8', first: '4' })
  workbench.sweep()
  await sweeper.run()
  const { record } = state()
  const notes = [0, 1].map(point =>
    marginCells(record!, { point, trial: 0 }).flatMap(cell =>
      cell.kind === 'time' && cell.expanded !== undefined ? [cell.line] : [],
    ),
  )
  expect(notes).toEqual([[], [10]])
})

describe('the draft', () => {
  test('falls back to its first routine where the picked one is renamed', () => {
    const { workbench, state } = setUp(DEMO_DRAFT.text)
    workbench.pickRoutine('daysum')
    workbench.write(DEMO_DRAFT.text.replace('routine daysum', 'routine level'))
    workbench.checkNow()
    expect(state().checked.program?.routine.name).toBe('bylevel')
  })

  test('is checked a moment after the last change, not before', () => {
    const { workbench, state } = setUp()
    workbench.write('routine')
    expect(state().checked.text).toBe(SUM)
    vi.advanceTimersByTime(1000)
    expect(state().checked.text).toBe('routine')
    expect(state().checked.program).toBeUndefined()
    // The sentence keeps the sizes of the last draft that was whole.
    expect(state().shape.sizes).toEqual(['n'])
  })

  test('gives way to the demo and comes back, its setting too', () => {
    const { workbench, state } = setUp()
    const { draft, settingText } = state()
    expect(workbench.differsFromDemo()).toBe(true)
    workbench.openDemo()
    expect(state().draft).toEqual(DEMO_DRAFT)
    expect(workbench.differsFromDemo()).toBe(false)
    const [notice] = state().notices
    notice?.actions[0]?.act()
    expect(state().draft).toEqual(draft)
    expect(state().settingText).toEqual(settingText)
  })

  test('survives a reload, a moment after the last change', () => {
    const { workbench, drawer, state } = setUp()
    workbench.write(`${SUM}# more\n`)
    vi.advanceTimersByTime(1000)
    const kept = readKept(drawer.getItem(KEPT_KEY) ?? '')
    expect(kept).toMatchObject({ draft: state().draft, setting: state().settingText })
  })

  test('is written down at once where the page goes', () => {
    const { workbench, drawer } = setUp()
    vi.advanceTimersByTime(1000)
    workbench.write('routine last_words')
    workbench.keepNow()
    expect(readKept(drawer.getItem(KEPT_KEY) ?? '')).toMatchObject({ draft: { text: 'routine last_words' } })
  })

  test('opens as the demo where what was kept is damaged, which can be had back', () => {
    const { state, download } = setUp(SUM, { [KEPT_KEY]: '{"version":1,' })
    expect(state().draft).toEqual(DEMO_DRAFT)
    const [notice] = state().notices
    expect(notice).toMatchObject({ key: 'damaged', tone: 'trouble' })
    notice?.actions[0]?.act()
    expect(download).toHaveBeenCalledWith(expect.any(String), '{"version":1,')
  })
})

describe('the demo', () => {
  test('has no errors, and fits its setting', () => {
    const { state, workbench } = setUp(DEMO_DRAFT.text)
    expect(state().checked.diagnostics).toEqual([])
    expect(state().checked.names).toEqual(['bylevel', 'daysum'])
    expect(obstacle(state())).toBeUndefined()
    workbench.pickRoutine('daysum')
    expect(state().checked.program?.routine.name).toBe('daysum')
    expect(obstacle(state())).toBeUndefined()
  })
})
