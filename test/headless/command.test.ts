import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, describe, expect, test } from 'vitest'
import { runCommand } from '../../src/headless/command'

const ROUTINES = join(import.meta.dirname, 'routines')
const scratch = mkdtempSync(join(tmpdir(), 'tallyword-command-'))
afterAll(() => rmSync(scratch, { recursive: true, force: true }))

interface Ended {
  readonly exit: number
  readonly out: string
  readonly error: string
}

async function run(words: readonly string[], stdin = '', folder = ROUTINES): Promise<Ended> {
  const out: string[] = []
  const error: string[] = []
  const exit = await runCommand(words, {
    folder,
    print: text => out.push(text),
    complain: text => error.push(text),
    readInput: async () => stdin,
  })
  return { exit, out: out.join('\n'), error: error.join('\n') }
}

/** A command line in one text; no value in it holds a blank. */
function tallyword(line: string, stdin = ''): Promise<Ended> {
  return run(line.split(' '), stdin)
}

function routine(name: string, text: string): string {
  const file = join(scratch, name)
  writeFileSync(file, text)
  return file
}

describe('count', () => {
  test('prints the object that the notation promises', async () => {
    const data = routine('data.json', '{"a": ["0xffffffffffffffff", 1, 2]}')
    const { exit, out, error } = await run(['count', 'total.tally', '--w', '64', '--input', data, '--json'])
    expect(error).toBe('')
    expect(exit).toBe(0)
    expect(JSON.parse(out)).toEqual({
      routine: 'total',
      n: 3,
      w: 64,
      set: 'full',
      charges: 'unit',
      // By hand: 3 moves; 4 tests of the loop; a pass costs load, add, compare, add, jump; one carry.
      time: 3 + 4 + 3 * 5 + 1,
      byClass: {
        add: 7,
        logic: 0,
        shift: 0,
        multiply: 0,
        divide: 0,
        bitscan: 0,
        load: 3,
        store: 0,
        move: 3,
        compare: 7,
        jump: 3,
        call: 0,
      },
      byLine: [
        { line: 9, count: 1, time: 1 },
        { line: 10, count: 1, time: 1 },
        { line: 11, count: 1, time: 1 },
        { line: 13, count: 4, time: 4 },
        { line: 14, count: 3, time: 3 },
        { line: 15, count: 3, time: 3 },
        { line: 16, count: 3, time: 3 },
        { line: 17, count: 1, time: 1 },
        { line: 19, count: 3, time: 3 },
        { line: 20, count: 3, time: 3 },
      ],
      space: { input: 4, output: 2, working: 2, declared: 0, constants: 0 },
      outputs: { lo: '2', hi: '1' },
      audit: [],
      checks: [
        { kind: 'time', place: 0, line: 5, outcome: 'holds', count: 23, bound: '26', ratio: 23 / 26 },
        { kind: 'space', place: 1, line: 6, outcome: 'holds', count: 2, bound: '4', ratio: 0.5 },
        { kind: 'check', place: 0, line: 7, outcome: 'holds' },
      ],
    })
  })

  test('both ways of running print the same', async () => {
    for (const file of ['total.tally', 'order.tally', 'station.tally'])
      for (const w of ['8', '13', '32', '47', '64']) {
        const line = `count ${file} --n 100 --w ${w} --json`
        const [engine, reference] = [await tallyword(line), await tallyword(`${line} --way reference`)]
        expect(engine.exit).toBe(0)
        expect(reference).toEqual(engine)
      }
  })

  test('runs words past 64 bits', async () => {
    const { exit, out } = await tallyword('count total.tally --n 50 --w 200 --json')
    expect(exit).toBe(0)
    expect(JSON.parse(out).checks.map((check: { outcome: string }) => check.outcome)).toEqual(
      Array(3).fill('holds'),
    )
  })

  test('reads as a table', async () => {
    const { exit, out } = await tallyword('count total.tally --n 1024 --w 64')
    expect(exit).toBe(0)
    expect(out).toContain('total: n = 1,024, w = 64\n')
    expect(out).toMatch(/^load +1,024$/m)
    expect(out).toMatch(/^ +14 +1,024 +x +<- a\[i\]$/m)
    expect(out).toMatch(/^input +1,025$/m)
    expect(out).toMatch(/^ +5 +holds +claim time +<= 7\*n \+ 5/m)
    expect(out).toMatch(/not cycles, not seconds/)
  })

  test('prices what it is told to', async () => {
    const { out } = await tallyword('count total.tally --n 10 --w 64 --charges operators,load=7 --json')
    const { time, byClass, charges } = JSON.parse(out)
    expect(charges).toBe('operators,load=7')
    expect(time).toBe(byClass.add + 7 * byClass.load)
    const table = await tallyword('count total.tally --n 10 --w 64 --charges operators,load=7')
    expect(table.out).toMatch(/^load +10 +7 +70$/m)
  })

  test('prices past 2^53 stay exact, as strings', async () => {
    const { out } = await tallyword('count total.tally --n 1000 --w 64 --charges load=9007199254740991 --json')
    const { time, byClass } = JSON.parse(out)
    const others = Object.values<number>(byClass).reduce((sum, count) => sum + count) - byClass.load
    expect(time).toBe(String(BigInt(others) + 1000n * 9007199254740991n))
  })

  test('takes the routine from standard input, and data too', async () => {
    const text = readFileSync(join(ROUTINES, 'total.tally'), 'utf8')
    const fromFile = await tallyword('count total.tally --n 10 --json')
    expect(await tallyword('count - --n 10 --json', text)).toEqual(fromFile)
    const data = await tallyword('count total.tally --input - --json', '{"a": [5, 6]}')
    expect(JSON.parse(data.out).outputs).toEqual({ lo: '11', hi: '0' })
  })

  test('takes sizes from the data, and a length that is no plain size from --n', async () => {
    const text =
      'routine pairs\n  in a[2*n]\n  out b[n]\nbegin\n  for i from 0 to n - 1\n    b[i] <- a[i] + a[i + n]\n  end\nend\n'
    const file = routine('pairs.tally', text)
    const data = routine('pairs.json', '{"a": [1, 2, 30, 40]}')
    expect((await run(['count', file, '--input', data])).error).toContain('pairs has a size n; give it: --n 1024')
    const { out } = await run(['count', file, '--input', data, '--n', '2', '--json'])
    expect(JSON.parse(out).outputs).toEqual({ b: ['31', '42'] })
  })

  test('picks among several routines, and says what it took', async () => {
    const first = await tallyword('count station.tally --n 8 --w 16')
    expect(first.error).toContain('it holds gauge, scaled, share; taking gauge')
    const scaled = await tallyword('count station.tally --routine scaled --w 16 --json --seed 3')
    expect(scaled.error).toBe('')
    expect(JSON.parse(scaled.out)).toMatchObject({ routine: 'scaled', n: 0, time: 1 })
    const none = await tallyword('count station.tally --routine scald --w 16')
    expect(none).toMatchObject({ exit: 2, out: '' })
    expect(none.error).toContain('scald')
  })

  test('lists what was known before the run', async () => {
    const { out } = await tallyword('count station.tally --n 8 --w 16 --let k=5 --json')
    expect(JSON.parse(out).audit).toEqual([
      { kind: 'constant', line: 6, message: 'mask = 31 is known before the run' },
    ])
  })

  test('repeats any trial of a sweep', async () => {
    const swept = await tallyword('sweep order.tally --n 40 --w 16 --trials 3 --json --seed 9')
    const trials = JSON.parse(swept.out).points[0].trials as { time: number }[]
    expect(new Set(trials.map(({ time }) => time)).size).toBeGreaterThan(1)
    for (const [at, { time }] of trials.entries()) {
      const one = await tallyword(`count order.tally --n 40 --w 16 --json --seed 9 --trial ${at + 1}`)
      expect(JSON.parse(one.out).time).toBe(time)
    }
  })

  test.each([
    ['count', 'count needs a file'],
    ['count nowhere.tally', 'cannot read nowhere.tally: there is no such file'],
    ['count .', 'cannot read .: it is a folder'],
    ['count total.tally', 'total has a size n; give it: --n 1024'],
    ['count total.tally order.tally --n 4', 'count takes one file, and order.tally came on top'],
    ['count total.tally --n 4,8', '--n or --size gives several values'],
    ['count total.tally --n 4 --w 8,16', '--w gives several values'],
    ['count total.tally --n x', '--n: "x" is not a size'],
    ['count total.tally --n 4 --w 1', '--w: no word has 1 bits here'],
    ['count total.tally --n 4 --set ful', '--set ful: there is no such choice; did you mean full?'],
    ['count total.tally --n 4 --feed sorte', '--feed sorte: there is no such choice; did you mean sorted?'],
    ['count total.tally --n 4 --way fast', '--way fast: there is no such choice; choose engine, reference'],
    ['count total.tally --n 4 --way engine --w 65', 'words of 65 bits are not compiled'],
    ['count total.tally --n 4 --charges move', '--charges: "move" is neither a preset nor a price'],
    ['count total.tally --n 4 --let k=8', 'total has no let k; it has no lets'],
    ['count total.tally --n 4 --size m=8', 'total has no size m; it has n'],
    ['count total.tally --n 4 --size 8', '--size 8 names no size'],
    ['count total.tally --n 4 --seed -1', '--seed: "-1" is not a whole number'],
    ['count total.tally --n 4 --trial 0', '--trial is 0; write a whole number from 1'],
    ['count total.tally --n 4 --jsn', 'count has no flag --jsn; did you mean --json?'],
    ['cuont total.tally --n 4', 'there is no verb cuont; did you mean count?'],
    ['count station.tally --routine scaled --n 8', 'scaled has no size, so --n says nothing'],
    ['count total.tally --n 256 --w 8', 'n = 256 does not fit a word of 8 bits'],
    ['count order.tally --n 0 --w 8', 'order.tally:4:3: need n >= 1 fails at n = 0, w = 8'],
    ['count total.tally --n 4 --input x.json --feed sorted', '--input and --feed both give the input'],
  ])('%s ends with 2', async (line, message) => {
    const { exit, out, error } = await tallyword(line)
    expect({ exit, out }).toEqual({ exit: 2, out: '' })
    expect(error).toContain(message)
  })

  test.each([
    ['{"a": [1, 2', 'it is not JSON'],
    ['[1, 2]', 'it holds no object'],
    ['{"a": [1], "b": 5}', 'b: no input of that name; routine total takes a'],
    ['{}', 'total has a size n'],
    ['{"a": 5}', 'total has a size n'],
    ['{"a": [1, -2]}', 'a[1] is -2: words are whole numbers from 0'],
    ['{"a": [1.5]}', 'a[0] is 1.5: words are whole numbers from 0'],
    ['{"a": [1, 256]}', 'a[1] is 256, which does not fit in a word of 8 bits (0 .. 2^8 - 1)'],
    ['{"a": [18446744073709551616]}', 'a[0] is a number past 2^53, which JSON does not keep exactly'],
    ['{"a": ["12x"]}', 'a[0] is "12x", which is no word'],
    ['{"a": [null]}', 'a[0] is null, which is no word'],
    ['{"a": [[1]]}', 'a[0] is [1], which is no word'],
  ])('data %s is told what is wrong', async (data, message) => {
    const { exit, out, error } = await tallyword('count total.tally --w 8 --input -', data)
    expect({ exit, out }).toEqual({ exit: 2, out: '' })
    expect(error).toContain(message)
  })

  test('errors of a routine stand at their places, all of them', async () => {
    const file = routine('wrong.tally', 'routine wrong\n  in a[n]\n  out s\nbegin\n  s <- a\n  t <- s + u\nend\n')
    const { exit, out, error } = await run(['count', file, '--n', '4'])
    expect({ exit, out }).toEqual({ exit: 2, out: '' })
    expect(error).toMatch(/wrong\.tally:5:\d+: .+\. \S/)
    expect(error.split('\n').length).toBeGreaterThan(1)
  })

  test('a class that is off is refused at each of its lines', async () => {
    const { exit, error } = await tallyword('count station.tally --routine scaled --w 16 --set no-multiply')
    expect(exit).toBe(2)
    expect(error).toMatch(/^station\.tally:26:\d+: .*multiply.*no-multiply/)
  })

  test('a class that is off is expanded where that is asked for, and says so', async () => {
    const line = 'count station.tally --routine scaled --w 16 --set no-multiply --off expand --json --seed 3'
    const { exit, out, error } = await tallyword(line)
    expect({ exit, error }).toEqual({ exit: 0, error: '' })
    const { time, byClass, outputs, audit } = JSON.parse(out)
    expect(byClass.multiply).toBe(0)
    expect(time).toBeGreaterThan(20)
    expect(audit).toMatchObject([
      { kind: 'expanded', line: 26, message: expect.stringContaining('multiply is off') },
    ])
    const full = JSON.parse((await tallyword(line.replace('no-multiply', 'full'))).out)
    expect(full.outputs).toEqual(outputs)
    expect(await tallyword(`${line} --way reference`)).toEqual({ exit, out, error })
  })

  test('a run that fails ends with 3 and gives no count', async () => {
    const { exit, out, error } = await tallyword(
      'count station.tally --routine share --w 16 --set extended --input -',
      '{"x": 7, "y": 0}',
    )
    expect({ exit, out }).toEqual({ exit: 3, out: '' })
    expect(error).toBe('station.tally:33:8: 7 is divided by 0 (w = 16)')
  })

  test('a broken claim ends with 1, the counts still printed', async () => {
    const text = readFileSync(join(ROUTINES, 'total.tally'), 'utf8').replace('7*n + 5', '6*n')
    const { exit, out, error } = await tallyword('count - --n 10 --json', text)
    expect(exit).toBe(1)
    expect(JSON.parse(out).checks[0]).toMatchObject({ kind: 'time', outcome: 'broken', bound: '60' })
    expect(error).toMatch(/^stdin:5: claim time is broken/)
  })
})

describe('sweep', () => {
  test('writes CSV and JSON that agree', async () => {
    const folder = join(scratch, 'out')
    const line = [
      'sweep',
      'total.tally',
      '--n',
      '2^2..2^9',
      '--w',
      '8,lg(n)^2',
      '--set',
      'full,no-multiply',
      '--trials',
      '2',
    ]
    const { exit, out } = await run([...line, '--out', folder])
    expect(exit).toBe(0)
    expect(out.split('\n')).toEqual([join(folder, 'total.csv'), join(folder, 'total.json')])
    const record = JSON.parse(readFileSync(join(folder, 'total.json'), 'utf8'))
    expect(record.setting).toMatchObject({ sizes: { n: '2^2..2^9' }, widths: ['8', 'lg(n)^2'], trials: 2, seed: 1 })
    expect(record.generator).toMatchObject({ package: 'pure-rand' })
    expect(record.points.length).toBe(2 * 2 * 8)
    const rows = readFileSync(join(folder, 'total.csv'), 'utf8').split('\r\n')
    const titles = rows[0]!.split(',')
    const cells = rows
      .slice(1, -1)
      .map(row => Object.fromEntries(row.split(',').map((cell, at) => [titles[at], cell])))
    const done = record.points.filter((point: { status: string }) => point.status === 'done')
    const times = done.flatMap((point: { trials: { time: number }[] }) =>
      point.trials.map(({ time }) => String(time)),
    )
    expect(cells.filter(row => row.status === 'done').map(row => row.time)).toEqual(times)
    // n = 256 and 512 do not fit in words of 8 bits, under either set.
    const refused = cells.filter(row => row.status === 'refused')
    expect(refused.map(row => [row.n, row.w])).toEqual([
      ['256', '8'],
      ['512', '8'],
      ['256', '8'],
      ['512', '8'],
    ])
  })

  test('prints a table, refused points with their reasons', async () => {
    const { exit, out } = await tallyword('sweep total.tally --n 100..300,200 --w 8')
    expect(exit).toBe(0)
    expect(out).toMatch(/^100 +8 +full +\d+ +/m)
    expect(out).toMatch(/^ *n +w +set/m)
  })

  test('shows spread where trials differ', async () => {
    const { out } = await tallyword('sweep order.tally --n 16,32 --w 16 --trials 4')
    expect(out).toMatch(/n +w +set +least +mean +most/)
  })

  test('shows progress while it runs, and takes it away', async () => {
    const seen: (string | undefined)[] = []
    await runCommand(['sweep', 'total.tally', '--n', '8,16'], {
      folder: ROUTINES,
      print: () => {},
      complain: () => {},
      progress: text => seen.push(text),
      readInput: async () => '',
    })
    expect(seen).toEqual(['1 of 2 points  n = 8, w = 64, full', '2 of 2 points  n = 16, w = 64, full', undefined])
  })

  test('a grid without a point that runs ends with 2', async () => {
    const { exit, error } = await tallyword('sweep total.tally --n 300 --w 8')
    expect(exit).toBe(2)
    expect(error).toContain('none of the 1 points could be run')
  })

  test('a trial that fails is named, and count repeats it', async () => {
    const file = routine('picky.tally', 'routine picky\n  in a[n]\n  out s\nbegin\n  s <- 10 / a[0]\nend\n')
    const setting = ['--n', '1', '--w', '4', '--set', 'extended']
    const { exit, error } = await run(['sweep', file, ...setting, '--trials', '200'])
    expect(exit).toBe(3)
    const trial = /n = 1, w = 4, extended, trial (\d+): line 5: 10 is divided by 0/.exec(error)![1]!
    expect(Number(trial)).toBeGreaterThan(1)
    expect((await run(['count', file, ...setting, '--trial', trial])).exit).toBe(3)
    expect((await run(['count', file, ...setting])).exit).toBe(0)
  })

  test('a point that fails ends with 3, and is named', async () => {
    const text = 'routine reach\n  in a[n]\n  out s\nbegin\n  i <- n - 4\n  s <- a[i + 3]\n  s <- a[i + n]\nend\n'
    const { exit, error } = await tallyword('sweep - --n 2,4 --w 8', text)
    expect(exit).toBe(3)
    expect(error).toContain('n = 4, w = 8, full: line 7: index 4 is outside a')
  })
})

describe('claims', () => {
  test('hold everywhere, and say at how many points', async () => {
    const { exit, out, error } = await tallyword('claims total.tally --n 2^4..2^8 --w 16,32')
    expect(error).toBe('')
    expect(exit).toBe(0)
    expect(out).toMatch(/^ +5 +claim time +<= 7\*n \+ 5 +holds +at all 10 points$/m)
    expect(out).toMatch(/^ +7 +check hi .* +holds +at all 10 points$/m)
  })

  test('broken ones name the first point, smallest n first, with both sides', async () => {
    const text = readFileSync(join(ROUTINES, 'total.tally'), 'utf8').replace('7*n + 5', '6*n + 2')
    const { exit, out, error } = await tallyword('claims - --n 2^2..2^5 --w 64,16 --feed equal', text)
    expect(exit).toBe(1)
    expect(error).toMatch(/^stdin:5: claim time is broken at n = 4, w = 16, full$/)
    expect(out).toMatch(/broken +at 8 of 8 points, first n = 4, w = 16, full: \d+ against 26/)
  })

  test('need something to judge', async () => {
    const { exit, error } = await tallyword('claims station.tally --routine scaled')
    expect(exit).toBe(2)
    expect(error).toContain('scaled has no claim and no check')
  })
})

test('help lists the verbs, and the flags of each', async () => {
  expect(await tallyword('help')).toMatchObject({ exit: 0, error: '' })
  expect((await tallyword('help')).out).toMatch(/count.*sweep.*claims/s)
  expect((await tallyword('help count')).out).toContain('--input DATA.json')
  expect((await tallyword('count --help')).out).toBe((await tallyword('help count')).out)
  expect((await run([])).exit).toBe(2)
})
