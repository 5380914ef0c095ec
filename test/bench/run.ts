import { mkdtempSync, rmSync } from 'node:fs'
import { loadavg, tmpdir } from 'node:os'
import { join } from 'node:path'
import { compileProgramSync } from '../../src/engine'
import { readProgram } from '../../src/routine'
import { type BenchCase, CASES } from './cases'
import { radixOnBigInts, radixOnHalves } from './javascript'
import { longRoutine } from './long-routine'
import { Ready } from './ready'
import { compareTimes, median, ms, ratioText } from './statistics'
import { checksumOf, hasGcc, prepareTwin } from './twin'

// `npm run bench`: how fast counted runs are against C that counts nothing, and against JavaScript counted by hand.
// Times are this machine's, for this purpose alone: unit-cost counts are neither cycles nor seconds.
// usage: npm run bench -- [--rounds N] [NAME ...]   a NAME is a case's, or `compile`.

/** The most that the counted radix sort of 2^20 words of 64 bits may take, in times of its C twin's. */
const FLOOR = 1.3
/** Runs of each side in a round; their median stands for the round. */
const RUNS = 3

const rest = process.argv.slice(2)
const roundsAt = rest.indexOf('--rounds')
const rounds = roundsAt >= 0 ? Number(rest.splice(roundsAt, 2)[1]) : 11
const known = [...CASES.map(({ name }) => name), 'compile']
const unknown = rest.filter(name => !known.includes(name))
if (unknown.length > 0 || !Number.isInteger(rounds) || rounds < 1) {
  console.error(`usage: npm run bench -- [--rounds N] [NAME ...], a NAME being one of ${known.join(', ')}`)
  process.exit(2)
}
const wanted = (name: string) => rest.length === 0 || rest.includes(name)
const cases = CASES.filter(({ name }) => wanted(name))

const builds = mkdtempSync(join(tmpdir(), 'tallyword-bench-'))
process.on('exit', () => rmSync(builds, { recursive: true, force: true }))

const COLUMNS = { routine: 12, w: 2, n: 8, operations: 10, cold: 9, warm: 9, 'set-up': 9, 'ns/op': 6, C: 9 }

function row(cells: readonly string[], ratio: string): string {
  const widths = Object.values(COLUMNS)
  return [
    ...cells.map((cell, at) => (at === 0 ? cell.padEnd(widths[0]!) : cell.padStart(widths[at]!))),
    ratio,
  ].join('  ')
}

/** One case at one width: rounds of C and counted runs in turn. Gives the median ratio where there is a twin. */
function compareCase(each: BenchCase, width: number): number | undefined {
  const ready = new Ready(each, width, each.n)
  const idle = new Ready(each, width, each.n, true)
  const first = ready.run()
  const operations = ready.operations(first.good)
  const checksum = checksumOf(ready.result(first.good))
  const twin = hasGcc ? prepareTwin(each.twin ?? each.name, width, ready.words, RUNS, builds) : undefined
  const counted: number[] = []
  const setUp: number[] = []
  const c: number[] = []
  for (let round = 0; round < rounds; round += 1) {
    const timing = twin?.()
    if (timing && timing.checksum !== checksum)
      throw new Error(`${each.name}, w = ${width}: the twin's result differs`)
    if (timing) c.push(timing.time)
    counted.push(median(Array.from({ length: RUNS }, () => ready.run().time)))
    setUp.push(median(Array.from({ length: RUNS }, () => idle.run().time)))
  }
  const ratio = twin && compareTimes(counted, c)
  const warm = median(counted)
  const cells = [each.name, width, each.n, operations, ms(first.time), ms(warm), ms(median(setUp))].map(String)
  const perOperation = ((warm * 1e6) / operations).toFixed(3)
  console.log(row([...cells, perOperation, twin ? ms(median(c)) : '-'], ratio ? ratioText(ratio) : '-'))
  return ratio?.median
}

/** The radix sort by hand in JavaScript; each version's result and operations are checked against the counted run's. */
function compareJavaScript(each: BenchCase): void {
  const ready = new Ready(each, 64, each.n)
  const { good } = ready.run()
  const versions = { 'on BigInts': radixOnBigInts, 'on Uint32Arrays, two halves a word': radixOnHalves }
  const times = Object.keys(versions).map((): number[] => [])
  const counted: number[] = []
  for (let round = 0; round < Math.min(rounds, 5); round += 1) {
    counted.push(ready.run().time)
    for (const [at, sort] of Object.values(versions).entries()) {
      const start = performance.now()
      const { sorted, operations } = sort(ready.words as BigUint64Array)
      times[at]!.push(performance.now() - start)
      if (round > 0) continue
      if (operations !== ready.operations(good)) throw new Error(`by hand ${operations} operations were counted`)
      if (checksumOf(sorted) !== checksumOf(ready.result(good))) throw new Error('the sort by hand differs')
    }
  }
  console.log('\nradix by hand in JavaScript, w = 64, n = 2^20: time, and times a counted run')
  for (const [at, name] of Object.keys(versions).entries()) {
    console.log(
      `  ${name.padEnd(36)} ${ms(median(times[at]!)).padStart(9)}  ${ratioText(compareTimes(times[at]!, counted))}`,
    )
  }
}

/** Nanoseconds per counted operation as n grows: flat once a run outweighs its set-up, until the caches end. */
function showGrowth(each: BenchCase): void {
  const cells = each.growth.map(n => {
    const ready = new Ready(each, each.widths[0]!, n)
    const { time, good } = ready.run()
    // Short runs are repeated, for about 20 ms in all.
    const repeats = Math.max(3, Math.min(2000, Math.ceil(20 / Math.max(time, 0.01))))
    const times = Array.from({ length: repeats }, () => ready.run().time)
    return `${n}: ${((median(times) * 1e6) / ready.operations(good)).toFixed(2)}`
  })
  console.log(`  ${each.name.padEnd(12)} w = ${each.widths[0]}  ${cells.join('  ')}`)
}

/** From source text to a compiled module, for routines of many lines. */
function showCompileTimes(): void {
  console.log('\nsource to module, median of 9 after one unmeasured')
  for (const count of [200, 2000]) {
    const text = longRoutine(count)
    const times = Array.from({ length: 10 }, () => {
      const start = performance.now()
      const { program, diagnostics } = readProgram(text)
      const read = performance.now()
      if (!program) throw new Error(diagnostics.map(({ message }) => message).join('; '))
      compileProgramSync(program, 64)
      return [read - start, performance.now() - read] as const
    }).slice(1)
    const all = ms(median(times.map(([read, compile]) => read + compile)))
    const parts = [0, 1].map(part => ms(median(times.map(time => time[part]!))))
    console.log(`  ${count} lines: ${all} (text to blocks ${parts[0]}, blocks to module ${parts[1]})`)
  }
}

if (!hasGcc) console.log('There is no gcc here, so no C times and no ratios: on Debian, install the package gcc.\n')
console.log(`${rounds} rounds; in each a C process of ${RUNS} runs, then ${RUNS} counted runs.`)
console.log(
  'cold: the first counted run. warm: a counted run as a whole: input in, junk, the routine, results out.',
)
console.log('set-up: the same with an empty body. C: gcc -O2, the kernel alone, counting nothing.')
console.log(`Load of the machine at the start: ${loadavg()[0]!.toFixed(1)}; what else runs disturbs the times.\n`)
if (cases.length > 0) console.log(row(Object.keys(COLUMNS), 'warm / C: median (least .. most; best / best)'))
for (const each of cases) {
  for (const width of each.widths) {
    const ratio = compareCase(each, width)
    if (each.name !== 'radix' || width !== 64 || ratio === undefined) continue
    const verdict = ratio <= FLOOR ? 'holds' : 'does not hold'
    console.log(`  floor: at most ${FLOOR} times C: ${verdict}`)
  }
}
for (const each of cases.filter(({ name }) => name === 'radix')) compareJavaScript(each)
const growing = cases.filter(({ growth }) => growth.length > 0)
if (growing.length > 0) console.log('\nnanoseconds per counted operation as n grows')
for (const each of growing) showGrowth(each)
if (wanted('compile')) showCompileTimes()
