import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, test } from 'vitest'
import { compileProgram } from '../../src/engine'
import { CHARGES, type Charges, weighTally } from '../../src/machine'
import { type Program, readProgram } from '../../src/routine'
import {
  ENGINE_WIDTH,
  findMismatch,
  gridPoints,
  type PointResult,
  parseSizes,
  parseWidths,
  runPoint,
  runSweep,
  type Setting,
  writeCsv,
} from '../../src/sweep'

const TEXTS = join(import.meta.dirname, '..', 'headless', 'routines')

function program(text: string): Program {
  const read = readProgram(text)
  if (!read.program) throw new Error(JSON.stringify(read.diagnostics))
  return read.program
}

const total = program(readFileSync(join(TEXTS, 'total.tally'), 'utf8'))
const order = program(readFileSync(join(TEXTS, 'order.tally'), 'utf8'))

interface Written extends Omit<Partial<Setting>, 'sizes' | 'widths'> {
  readonly sizes: Record<string, string>
  readonly widths: string
}

function setting({ sizes, widths, ...rest }: Written): Setting {
  const read = parseWidths(widths)
  if ('problem' in read) throw new Error(read.problem)
  const ranges = Object.entries(sizes).map(([name, text]) => {
    const range = parseSizes(text)
    if ('problem' in range) throw new Error(range.problem)
    return [name, range.range] as const
  })
  return {
    sizes: Object.fromEntries(ranges),
    widths: read.widths,
    lets: {},
    sets: ['full'],
    off: 'refuse',
    charges: CHARGES.unit,
    pattern: 'uniform',
    trials: 1,
    seed: 1,
    ...rest,
  }
}

function timeAt(result: PointResult | undefined, charges: Charges = CHARGES.unit) {
  if (result?.status !== 'done') throw new Error(`not done: ${JSON.stringify(result)}`)
  return result.trials.map(({ tally }) => weighTally(tally, charges).time)
}

describe('the grid', () => {
  test('has sets outermost, then widths, then sizes', () => {
    const points = gridPoints(
      setting({ sizes: { n: '4,8' }, widths: '16,lg(n)', sets: ['full', 'add-only'] }),
      total,
    )
    expect(points.map(({ set, width, widthChoice, n }) => [set, width, widthChoice, n])).toEqual([
      ['full', 16, 0, 4],
      ['full', 16, 0, 8],
      ['full', 2, 1, 4],
      ['full', 3, 1, 8],
      ['add-only', 16, 0, 4],
      ['add-only', 16, 0, 8],
      ['add-only', 2, 1, 4],
      ['add-only', 3, 1, 8],
    ])
    expect(points.map(({ index }) => index)).toEqual([0, 1, 2, 3, 4, 5, 6, 7])
  })

  const merge = program('routine pair\n  in a[n], b[m]\n  out s\nbegin\n  s <- n + m\nend\n')

  test('takes a size that is not given along with the first', () => {
    const points = gridPoints(setting({ sizes: { n: '4,8' }, widths: '16' }), merge)
    expect(points.map(({ sizes }) => sizes)).toEqual([
      { n: 4, m: 4 },
      { n: 8, m: 8 },
    ])
  })

  test('crosses sizes that are both given', () => {
    const points = gridPoints(setting({ sizes: { n: '4,8', m: '1,2' }, widths: '16' }), merge)
    expect(points.map(({ sizes }) => [sizes.n, sizes.m])).toEqual([
      [4, 1],
      [4, 2],
      [8, 1],
      [8, 2],
    ])
  })

  test('has one point a width for a routine without sizes', () => {
    const plain = program('routine plain\n  in x\n  out y\nbegin\n  y <- x + 1\nend\n')
    expect(gridPoints(setting({ sizes: {}, widths: '8,16' }), plain)).toMatchObject([
      { n: 0, sizes: {}, width: 8 },
      { n: 0, sizes: {}, width: 16 },
    ])
  })

  test.each([
    [setting({ sizes: {}, widths: '8' }), 'total has a size n, and the setting gives it no values'],
    [setting({ sizes: { n: '8', m: '8' }, widths: '8' }), 'total has no size m'],
    [setting({ sizes: { n: '8' }, widths: '8', lets: { k: 1n } }), 'total has no let k'],
    [setting({ sizes: { n: '8' }, widths: 'lg(m)' }), 'total has no size m'],
  ])('a setting that does not go with the routine is told apart: case %#', (wrong, problem) => {
    expect(findMismatch(wrong, total)).toMatchObject({ problem })
  })
})

describe('a sweep', () => {
  test('gives every point, in order, as it comes', async () => {
    const given = setting({ sizes: { n: '2^2..2^8' }, widths: '16,32,64', trials: 2 })
    const seen: [number, number, number][] = []
    const result = await runSweep(total, given, {
      onPoint: ({ point }, done, all) => seen.push([point.index, done, all]),
    })
    expect(result.complete).toBe(true)
    expect(seen).toEqual(Array.from({ length: 21 }, (_, at) => [at, at + 1, 21]))
    expect(result.points.map(({ point }) => point)).toEqual(gridPoints(given, total))
  })

  test('gives any point the counts that it has alone', async () => {
    const given = setting({ sizes: { n: '2^3..2^7' }, widths: '16,64', trials: 3, seed: 5 })
    const { points } = await runSweep(order, given)
    for (const point of gridPoints(given, order)) {
      const alone = await runPoint(order, given, point)
      expect(alone).toEqual(points[point.index])
      expect(await runPoint(order, given, point, { way: 'reference' })).toEqual(alone)
    }
  })

  test('gives the same input to every instruction set', async () => {
    const given = setting({ sizes: { n: '32' }, widths: '16', sets: ['full', 'no-multiply'], trials: 3 })
    const { points } = await runSweep(order, given)
    expect(timeAt(points[1])).toEqual(timeAt(points[0]))
    expect(points[1]!.point.set).toBe('no-multiply')
    expect(await runPoint(order, given, points[1]!.point)).toEqual(points[1])
  })

  test('refuses a set that lacks a class, at its points alone', async () => {
    const shifty = program('routine half\n  in a[n]\n  out s\nbegin\n  s <- a[0] >> 1\nend\n')
    const given = setting({ sizes: { n: '4' }, widths: '16', sets: ['full', 'add-only'] })
    const { points } = await runSweep(shifty, given)
    expect(points[0]!.status).toBe('done')
    expect(points[1]).toMatchObject({ status: 'refused', line: 5 })
  })

  test('expands what is off where it is told to, each set on its own', async () => {
    const square = program(
      'routine square\n  in a[n]\n  out s\n  check s = a[0]^2 mod 2^w\nbegin\n  s <- a[0] * a[0]\nend\n',
    )
    const given = setting({
      sizes: { n: '1,2' },
      widths: '16',
      sets: ['full', 'no-multiply', 'add-only'],
      off: 'expand',
      trials: 3,
    })
    const { points } = await runSweep(square, given)
    expect(points.map(({ status }) => status)).toEqual(Array(6).fill('done'))
    const times = points.map(point => timeAt(point)[0])
    expect(times[0]).toBe(3)
    expect(times[2]).toBeGreaterThan(20)
    expect(times[4]).toBeGreaterThan(20)
    for (const point of points) {
      if (point.status === 'done') expect(point.verdicts.map(({ outcome }) => outcome)).toEqual(['holds'])
      expect(await runPoint(square, given, point.point, { way: 'reference' })).toEqual(point)
    }
  })

  test('says why a width gives no machine', async () => {
    const { points } = await runSweep(total, setting({ sizes: { n: '2,8' }, widths: 'lg(n)' }))
    expect(points[0]).toMatchObject({ status: 'refused', reason: 'w = lg(n) is 1, and words have 2 to 4096 bits' })
    // 2^3 words do not have indices of 3 bits.
    expect(points[1]).toMatchObject({ status: 'refused' })
  })

  test('names the trial that fails', async () => {
    const picky = program('routine picky\n  in a[n]\n  out s\nbegin\n  s <- 10 / a[0]\nend\n')
    const given = setting({ sizes: { n: '1' }, widths: '2', sets: ['extended'], trials: 200 })
    const { points } = await runSweep(picky, given)
    expect(points[0]).toMatchObject({ status: 'refused' })
    const wide = await runSweep(picky, { ...given, widths: [{ kind: 'fixed', width: 4 }] })
    expect(wide.points[0]).toMatchObject({ status: 'failed', line: 5 })
  })

  test('stops when told to, between trials, and keeps what it has', async () => {
    const stop = new AbortController()
    const given = setting({ sizes: { n: '2^3..2^12' }, widths: '64', trials: 4 })
    const result = await runSweep(total, given, {
      signal: stop.signal,
      onPoint: (_, done) => {
        if (done === 3) stop.abort()
      },
    })
    expect(result.complete).toBe(false)
    expect(result.points.length).toBe(3)
  })

  test('compiles up to the width that it says', async () => {
    await expect(compileProgram(total, ENGINE_WIDTH)).resolves.toBeDefined()
    const given = setting({ sizes: { n: '4' }, widths: String(ENGINE_WIDTH + 1) })
    const [wide] = (await runSweep(total, given, { way: 'engine' })).points
    expect(wide).toMatchObject({ status: 'refused', reason: expect.stringContaining('run them by the reference') })
    expect((await runSweep(total, given)).points[0]!.status).toBe('done')
  })

  test('lets messages in while it works', async () => {
    const given = setting({ sizes: { n: '2^14' }, widths: '64', trials: 200 })
    const stop = new AbortController()
    setTimeout(() => stop.abort(), 30)
    const start = performance.now()
    const result = await runSweep(total, given, { signal: stop.signal })
    expect(result.complete).toBe(false)
    expect(performance.now() - start).toBeLessThan(2000)
  })

  test('keeps one tally for trials that agree', async () => {
    const { points } = await runSweep(
      total,
      setting({ sizes: { n: '64' }, widths: '200', trials: 3, pattern: 'equal' }),
    )
    const [point] = points
    if (point?.status !== 'done') throw new Error('not done')
    expect(point.trials[1]!.tally === point.trials[0]!.tally).toBe(
      JSON.stringify(point.trials[1]!.tally) === JSON.stringify(point.trials[0]!.tally),
    )
  })
})

describe('verdicts over trials', () => {
  const given = setting({ sizes: { n: '24' }, widths: '16', trials: 6 })

  async function verdictsOf(claim: string) {
    const text = readFileSync(join(TEXTS, 'order.tally'), 'utf8').replace(/claim .*/, claim)
    const [point] = (await runSweep(program(text), given)).points
    if (point?.status !== 'done') throw new Error('not done')
    return { verdict: point.verdicts[0]!, times: timeAt(point).map(Number) }
  }

  test('a bound shows the trial that comes nearest to it', async () => {
    const { verdict, times } = await verdictsOf('claim time <= 4*n^2 + 8*n')
    expect(verdict).toMatchObject({ outcome: 'holds', count: Math.max(...times), bound: '2496' })
    expect(verdict).not.toHaveProperty('trial')
  })

  test('a broken bound names its first trial and the worst count', async () => {
    const { times } = await verdictsOf('claim time <= 1')
    const bound = [...times].sort((a, b) => a - b)[2]!
    const { verdict } = await verdictsOf(`claim time <= ${bound}`)
    expect(verdict).toMatchObject({
      outcome: 'broken',
      count: Math.max(...times),
      trial: times.findIndex(time => time > bound),
    })
  })

  test('a broken equation shows the first trial that differs', async () => {
    const { times } = await verdictsOf('claim time <= 1')
    const trial = times.findIndex(time => time !== times[0])
    const { verdict } = await verdictsOf(`claim time = ${times[0]}`)
    expect(verdict).toMatchObject({ outcome: 'broken', count: times[trial], trial })
  })
})

test('CSV quotes what needs it, and ends its lines as RFC 4180 says', async () => {
  const shifty = program('routine half\n  in a[n]\n  out s\n  need n >= 4\nbegin\n  s <- a[0] + 1\nend\n')
  const result = await runSweep(
    shifty,
    setting({ sizes: { n: '2,4' }, widths: '16', charges: { ...CHARGES.unit, load: 2 } }),
  )
  const csv = writeCsv(result)
  expect(csv.endsWith('\r\n')).toBe(true)
  const [titles, refused, done, rest] = csv.split('\r\n')
  expect(rest).toBe('')
  expect(titles).toBe(
    'routine,n,w,width,set,status,trial,seed,charges,time,add,logic,shift,multiply,divide,bitscan,load,store,move,' +
      'compare,jump,call,index,input_words,output_words,working_words,declared_words,constants_words,broken,line,reason',
  )
  expect(refused).toMatch(/^half,2,16,16,full,refused,,,"unit,load=2",,+4,"need n >= 4 fails at n = 2, w = 16 .*"$/)
  expect(done).toMatch(/^half,4,16,16,full,done,1,\d+,"unit,load=2",3,1,0,0,0,0,0,1,0,0,0,0,0,1,5,1,0,0,0,$/)
})
