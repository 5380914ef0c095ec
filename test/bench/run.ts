import { execFileSync, spawnSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus'
import { type CompiledProgram, compileProgramSync } from '../../src/engine'
import {
  type Binding,
  bindProgram,
  CHARGES,
  DEFAULT_LIMITS,
  type Input,
  makeWords,
  type RunResult,
  tallyRun,
  weighTally,
} from '../../src/machine'
import { readProgram } from '../../src/routine'
import type { Words } from '../../src/routine/words'
import { type BenchCase, CASES } from './cases'
import { radixOnBigInts, radixOnHalves } from './javascript'
import { lines } from './long-routine'

// `npm run bench`: how fast counted runs are against C that counts nothing, and against JavaScript counted by hand.
// Times are wall-clock times of this machine, for this purpose alone: unit-cost counts are neither cycles nor seconds.
// usage: npm run bench -- [--rounds N] [NAME ...]

const HERE = import.meta.dirname
/** The most that the counted radix sort of 2^20 words of 64 bits may take, in times of the C twin's. */
const FLOOR = 1.3
const PER_ROUND = 3

const rest = process.argv.slice(2)
const roundsAt = rest.indexOf('--rounds')
const rounds = roundsAt >= 0 ? Number(rest.splice(roundsAt, 2)[1]) : 11
if (!Number.isInteger(rounds) || rounds < 1) throw new Error('--rounds takes a whole number from 1')
const unknown = rest.filter(name => name !== 'compile' && !CASES.some(each => each.name === name))
if (unknown.length > 0)
  throw new Error(`no such case: ${unknown.join(', ')}; there are ${CASES.map(c => c.name).join(', ')}`)
const wanted = (name: string) => rest.length === 0 || rest.includes(name)

const builds = mkdtempSync(join(tmpdir(), 'tallyword-bench-'))
process.on('exit', () => rmSync(builds, { recursive: true, force: true }))

/** A routine bound to a size, with its input, ready to run again and again. */
interface Ready {
  readonly binding: Binding
  readonly compiled: CompiledProgram
  readonly input: Input
  readonly words: Words
}

const compiledOnce = new Map<string, CompiledProgram>()

function prepare(each: BenchCase, width: number, n: number): Ready {
  const { program, diagnostics } = readProgram(readFileSync(join(HERE, `${each.name}.tally`), 'utf8'))
  if (!program)
    throw new Error(
      `${each.name}: ${diagnostics.map(({ span, message }) => `${span.line}: ${message}`).join('; ')}`,
    )
  const words = makeWords(width, inputOf(each, width, n))
  const point = { width, sizes: { n: words.length }, lets: {} }
  const bound = bindProgram(program, point, DEFAULT_LIMITS)
  if ('refusal' in bound) throw new Error(`${each.name} at n = ${n}: ${bound.refusal.reason}`)
  const key = `${each.name} ${width}`
  const compiled = compiledOnce.get(key) ?? compileProgramSync(program, width)
  compiledOnce.set(key, compiled)
  return { binding: bound.binding, compiled, input: { arrays: { a: words }, scalars: {}, junk: 1 }, words }
}

function inputOf({ input }: BenchCase, width: number, n: number): bigint[] {
  const generator = xoroshiro128plus(n)
  const bits = () => BigInt(generator.next() >>> 0)
  const random = () => (width > 32 ? (bits() << 32n) | bits() : bits())
  return input ? input(n, random) : Array.from({ length: n }, random)
}

interface Timed {
  /** Milliseconds. */
  readonly time: number
  readonly checksum: bigint
}

function runEngine(
  { compiled, binding, input }: Ready,
  result: BenchCase['result'],
): Timed & { good: RunResult & { ok: true } } {
  const start = performance.now()
  const good = compiled.run(binding, input, DEFAULT_LIMITS)
  const time = performance.now() - start
  if (!good.ok) throw new Error(good.failure.message)
  const words = typeof result === 'string' ? good.arrays[result]! : result.map(name => good.scalars[name]!)
  return { time, checksum: checksumOf(words), good }
}

function timeOf({ binding }: Ready, good: RunResult & { ok: true }): number {
  return Number(weighTally(tallyRun(binding, good), CHARGES.unit).time)
}

function checksumOf(words: Iterable<bigint | number>): bigint {
  let checksum = 0n
  for (const word of words) checksum = BigInt.asUintN(64, checksum * 31n + BigInt(word))
  return checksum
}

const hasGcc = spawnSync('gcc', ['--version']).status === 0

/** Compiles a twin and writes its input; each call of what comes back is a process of its own. */
function prepareTwin(each: BenchCase, width: number, words: Words): (() => Timed) | undefined {
  if (!hasGcc) return undefined
  const twin = each.twin ?? each.name
  const program = join(builds, `${twin}-${width}`)
  execFileSync('gcc', ['-O2', '-Wall', '-Wextra', `-DW=${width}`, '-o', program, join(HERE, `${twin}.c`)])
  const data = join(builds, `${twin}-${width}.words`)
  if (Array.isArray(words)) throw new Error('a twin takes words of at most 64 bits')
  const { buffer, byteOffset, byteLength } = words as Uint32Array | BigUint64Array
  writeFileSync(data, new Uint8Array(buffer, byteOffset, byteLength))
  return () => {
    const output = execFileSync(program, [data, String(PER_ROUND)], { encoding: 'utf8' })
    const timings = output
      .trim()
      .split('\n')
      .map(line => line.split(' '))
    return { time: median(timings.map(([elapsed]) => Number(elapsed) / 1e6)), checksum: BigInt(timings[0]![1]!) }
  }
}

function median(values: readonly number[]): number {
  const sorted = values.toSorted((x, y) => x - y)
  const middle = sorted.length >> 1
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2
}

/** Ratios round by round: median, least and most. */
function ratioOf(times: readonly number[], others: readonly number[]): { middle: number; text: string } {
  const ratios = times.map((time, i) => time / others[i]!)
  const middle = median(ratios)
  return {
    middle,
    text: `${middle.toFixed(2)} (${Math.min(...ratios).toFixed(2)} .. ${Math.max(...ratios).toFixed(2)})`,
  }
}

const ms = (time: number) => `${time < 10 ? time.toFixed(2) : time.toFixed(1)} ms`

/** One case at one width: rounds of C and counted runs in turn. Gives the median ratio where there is a twin. */
function compareCase(each: BenchCase, width: number): number | undefined {
  const ready = prepare(each, width, each.n)
  const twin = prepareTwin(each, width, ready.words)
  // A first long run stays in the host's baseline tier: a short one warms the module up.
  runEngine(prepare(each, width, each.growth[0] ?? 256), each.result)
  const first = runEngine(ready, each.result)
  const operations = timeOf(ready, first.good)
  const engine: number[] = []
  const c: number[] = []
  for (let round = 0; round < rounds; round += 1) {
    if (twin) {
      const timed = twin()
      if (timed.checksum !== first.checksum)
        throw new Error(`${each.name}, w = ${width}: the twin's result differs`)
      c.push(timed.time)
    }
    engine.push(median(Array.from({ length: PER_ROUND }, () => runEngine(ready, each.result).time)))
  }
  const perOperation = (median(engine) * 1e6) / operations
  const ratio = twin ? ratioOf(engine, c) : undefined
  const figures = [
    each.name.padEnd(12),
    String(width).padStart(3),
    String(each.n).padStart(8),
    String(operations).padStart(11),
    ms(first.time).padStart(9),
    ms(median(engine)).padStart(9),
    perOperation.toFixed(3).padStart(8),
    (twin ? ms(median(c)) : '-').padStart(9),
    ratio?.text ?? '-',
  ]
  console.log(figures.join('  '))
  return ratio?.middle
}

/** The radix sort by hand in JavaScript, each version checked against the counted run's operations. */
function compareJavaScript(): void {
  const each = CASES.find(({ name }) => name === 'radix')!
  const ready = prepare(each, 64, each.n)
  const { good, checksum } = runEngine(ready, each.result)
  const operations = timeOf(ready, good)
  const versions = { BigInt: radixOnBigInts, 'Uint32Array halves': radixOnHalves }
  const times = Object.fromEntries(Object.keys(versions).map(name => [name, [] as number[]]))
  const engine: number[] = []
  for (let round = 0; round < Math.min(rounds, 5); round += 1) {
    engine.push(runEngine(ready, each.result).time)
    for (const [name, sort] of Object.entries(versions)) {
      const start = performance.now()
      const { sorted, operations: counted } = sort(ready.words as BigUint64Array)
      times[name]!.push(performance.now() - start)
      if (counted !== operations) throw new Error(`${name} counted ${counted} operations, not ${operations}`)
      if (checksumOf(sorted) !== checksum) throw new Error(`${name} sorted wrongly`)
    }
  }
  console.log('\nradix, w = 64, n = 2^20, counted by hand in JavaScript (time; times a counted run):')
  for (const [name, found] of Object.entries(times)) {
    console.log(`  ${name.padEnd(20)} ${ms(median(found)).padStart(10)}   ${ratioOf(found, engine).text}`)
  }
}

/** Time per counted operation as n grows: flat until the caches end. */
function showGrowth(each: BenchCase): void {
  const width = each.widths[0]!
  const cells = each.growth.map(n => {
    const ready = prepare(each, width, n)
    const { time, good } = runEngine(ready, each.result)
    const operations = timeOf(ready, good)
    // Short runs are repeated until about 20 ms are spent on them.
    const repeats = Math.max(3, Math.min(2000, Math.ceil(20 / Math.max(time, 0.001))))
    const times = Array.from({ length: repeats }, () => runEngine(ready, each.result).time)
    return `${n}: ${((median(times) * 1e6) / operations).toFixed(2)}`
  })
  console.log(`  ${each.name.padEnd(12)} w = ${width}  ${cells.join('  ')}`)
}

/** From source text to a compiled module, for routines of many lines. */
function showCompileTimes(): void {
  console.log('\nsource to module (median of 9, after one unmeasured):')
  for (const count of [200, 2000]) {
    const text = lines(count)
    const times = { read: [] as number[], compile: [] as number[] }
    for (let round = 0; round < 10; round += 1) {
      const start = performance.now()
      const { program, diagnostics } = readProgram(text)
      const read = performance.now()
      if (!program) throw new Error(diagnostics.map(({ span, message }) => `${span.line}: ${message}`).join('; '))
      compileProgramSync(program, 64)
      const done = performance.now()
      if (round === 0) continue
      times.read.push(read - start)
      times.compile.push(done - read)
    }
    const all = times.read.map((read, i) => read + times.compile[i]!)
    console.log(
      `  ${String(count).padStart(5)} lines  ${ms(median(all))}: text to blocks ${ms(median(times.read))}, ` +
        `blocks to module ${ms(median(times.compile))}`,
    )
  }
}

if (!hasGcc)
  console.log('gcc is not on this machine: no C times and no ratios below. Debian has it in the package gcc.\n')
console.log(
  `${rounds} rounds, each a C process (median of ${PER_ROUND}) and ${PER_ROUND} counted runs (their median).`,
)
console.log(
  'A counted run is timed whole: input in, junk, the routine, results out. The C twin is timed without its copying.\n',
)
console.log(
  'routine        w         n   operations      cold       warm   ns/op         C   counted / C, median (least .. most)',
)
let floorRatio: number | undefined
for (const each of CASES.filter(({ name }) => wanted(name))) {
  for (const width of each.widths) {
    const ratio = compareCase(each, width)
    if (each.name === 'radix' && width === 64) floorRatio = ratio
  }
}
if (floorRatio !== undefined) {
  const verdict = floorRatio <= FLOOR ? 'holds' : 'DOES NOT HOLD'
  console.log(`\nfloor: radix, w = 64, n = 2^20, at most ${FLOOR} times C: ${floorRatio.toFixed(2)}, ${verdict}`)
}
if (wanted('radix')) compareJavaScript()
console.log('\nnanoseconds per counted operation as n grows:')
for (const each of CASES.filter(({ name, growth }) => wanted(name) && growth.length > 0)) showGrowth(each)
if (wanted('compile')) showCompileTimes()
