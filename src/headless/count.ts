import { feedInput, readData, readInput, sizesOfData, trialSeed } from '../feed'
import { INSTRUCTION_SETS, judgeRun, tallyRun } from '../machine'
import {
  bindPoint,
  type GridPoint,
  gridPoints,
  memoryProblem,
  programUnder,
  runBinding,
  type Setting,
  wayProblem,
} from '../sweep'
import { type CountReport, writeCountJson } from './count-json'
import { writeCountText } from './count-text'
import type { Arguments, Flag } from './flags'
import { RUN_FLAGS, readCount, readSetting, readWay } from './setting-flags'
import { readSource, readText, type Source, sayAt, sayDiagnostic, sayFailure } from './source'
import { EXIT, type Exit, Leave, misuse, type Terminal } from './terminal'

export const COUNT_FLAGS: readonly Flag[] = [
  { name: 'n', value: '1024', help: 'the size (of the data, where --input is given)' },
  { name: 'w', value: '64', help: "the word width, or an expression in the sizes: 'lg(n)^2' (default 64)" },
  { name: 'set', value: 'full', help: `the instruction set: ${Object.keys(INSTRUCTION_SETS).join(', ')}` },
  { name: 'input', value: 'DATA.json', help: 'the input: {"a": [1, 2, 3], "x": "0xffff"}; - for standard input' },
  { name: 'trial', value: '1', help: "which of a sweep's trials to repeat (default 1)" },
  { name: 'json', help: 'one JSON object instead of text' },
  ...RUN_FLAGS,
]

/** `count`: one run at one point, in full. */
export async function count(given: Arguments, terminal: Terminal): Promise<Exit> {
  const source = await readSource(terminal, 'count', given.files, given.value('routine'))
  const { program } = source
  const data = await readDataFile(given, terminal)
  const { sizes } = data ? takeData(data.file, sizesOfData(data.data, program.routine)) : { sizes: {} }
  const [first] = program.routine.sizes
  if (first !== undefined && sizes[first] === undefined && !given.has('n'))
    throw misuse(`${program.routine.name} has a size ${first}`, 'give it: --n 1024')
  const setting = readSetting(given, program, sizes)
  const point = onlyPoint(setting, source)
  const way = readWay(given)

  const under = programUnder(program, point.set, setting.off)
  if ('refused' in under)
    throw new Leave(EXIT.usage, under.refused.map(each => sayDiagnostic(source.file, each)).join('\n'))
  const bound = bindPoint(program, setting, point)
  if (!('binding' in bound)) throw new Leave(EXIT.usage, sayAt(source.file, bound.span, bound.reason))
  const { binding } = bound
  const trial = readCount('--trial', given.value('trial') ?? '1', 1)
  const seed = trialSeed(setting.seed, point, trial - 1)
  const fed = data
    ? takeData(data.file, readInput(data.data, binding, seed))
    : takeData(source.file, feedInput(binding, setting.pattern, seed))
  const unfit = wayProblem(point.width, way)
  if (unfit) throw misuse(unfit, 'leave --way out')
  const options = way ? { way } : {}
  const result = await runBinding(binding, fed.input, options).catch(error => memoryProblem(error, binding))
  if ('problem' in result) throw new Leave(EXIT.usage, sayAt(source.file, undefined, result.problem))
  if (!result.ok) throw new Leave(EXIT.failed, sayFailure(source.file, result.failure))
  const tally = tallyRun(binding, result)
  const verdicts = judgeRun(binding, fed.input, result, tally, setting.charges)
  const report: CountReport = {
    binding,
    setting,
    point,
    result,
    tally,
    verdicts,
    fed: data ? `input of ${data.file}` : `${setting.pattern} input, seed ${setting.seed}, trial ${trial}`,
  }
  terminal.print(given.has('json') ? writeCountJson(report) : writeCountText(report))
  for (const { kind, line, outcome, reason } of verdicts) {
    const what = kind === 'check' ? 'check' : `claim ${kind}`
    if (outcome === 'broken') terminal.complain(`${source.file}:${line}: ${what} is broken`)
    if (outcome === 'undecided') terminal.complain(`${source.file}:${line}: ${what} is undecided: ${reason}`)
  }
  return verdicts.every(({ outcome }) => outcome === 'holds') ? EXIT.good : EXIT.broken
}

async function readDataFile(given: Arguments, terminal: Terminal) {
  const file = given.value('input')
  if (file === undefined) return undefined
  if (given.has('feed')) throw misuse('--input and --feed both give the input', 'leave one out')
  if (file === '-' && given.files.includes('-')) throw misuse('two inputs cannot both be -', 'give one as a file')
  return { file, ...takeData(file, readData(await readText(terminal, file))) }
}

function takeData<T extends object>(file: string, read: T | { problem: string }): T {
  if ('problem' in read) throw new Leave(EXIT.usage, `${file}: ${read.problem}`)
  return read
}

/** The point of a setting that has one; several are misuse. */
function onlyPoint(setting: Setting, { program }: Source): GridPoint {
  const several = (flag: string) =>
    misuse(`${flag} gives several values, and count takes one`, 'use sweep for a grid')
  if (setting.sets.length > 1) throw several('--set')
  if (setting.widths.length > 1) throw several('--w')
  const points = gridPoints(setting, program)
  if (points.length > 1) throw several('--n or --size')
  if (setting.trials > 1) throw misuse('count runs one trial', 'pick it with --trial, or use sweep')
  return points[0]!
}
