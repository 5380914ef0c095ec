import { nearestName } from '../routine'
import { CLAIMS_FLAGS, claims } from './claims'
import { COUNT_FLAGS, count } from './count'
import { type Arguments, type Flag, sortArguments } from './flags'
import { SWEEP_FLAGS, sweep } from './sweep'
import { EXIT, type Exit, Leave, misuse, type Terminal } from './terminal'

interface Verb {
  readonly name: string
  readonly summary: string
  readonly example: string
  readonly flags: readonly Flag[]
  readonly run: (given: Arguments, terminal: Terminal) => Promise<Exit>
}

const VERBS: readonly Verb[] = [
  {
    name: 'count',
    summary: 'one run of a routine: operations by class and line, space, outputs, checks',
    example: 'count FILE --n 1024 --w 64',
    flags: COUNT_FLAGS,
    run: count,
  },
  {
    name: 'sweep',
    summary: 'all points of a grid of sizes, widths and instruction sets',
    example: 'sweep FILE --n 2^6..2^16 --w 16,32,64 --out DIR',
    flags: SWEEP_FLAGS,
    run: sweep,
  },
  {
    name: 'claims',
    summary: 'every claim and check over a grid; exit 1 where one fails, naming the point',
    example: 'claims FILE --n 2^6..2^12 --w 16,32,64',
    flags: CLAIMS_FLAGS,
    run: claims,
  },
]

/** Runs one command line and gives its exit. Whatever a user can get wrong goes to standard error with a remedy. */
export async function runCommand(words: readonly string[], terminal: Terminal): Promise<Exit> {
  try {
    const [name, ...rest] = words
    if (name === undefined) throw new Leave(EXIT.usage, help())
    if (name === 'help' || name === '--help' || name === '-h') {
      terminal.print(rest[0] === undefined ? help() : helpVerb(findVerb(rest[0])))
      return EXIT.good
    }
    const verb = findVerb(name)
    if (rest.includes('--help') || rest.includes('-h')) {
      terminal.print(helpVerb(verb))
      return EXIT.good
    }
    return await verb.run(sortArguments(verb.name, rest, verb.flags), terminal)
  } catch (error) {
    terminal.progress?.(undefined)
    if (!(error instanceof Leave)) throw error
    terminal.complain(error.message)
    return error.exit
  }
}

function findVerb(name: string): Verb {
  const verb = VERBS.find(known => known.name === name)
  if (verb) return verb
  const near = nearestName(
    name,
    VERBS.map(known => known.name),
  )
  throw misuse(`there is no verb ${name}`, near ? `did you mean ${near}?` : 'tallyword help lists them')
}

function help(): string {
  const verbs = VERBS.map(({ name, summary, example }) => `  ${name.padEnd(8)}${summary}\n          ${example}`)
  return [
    'tallyword VERB FILE [flags]: exact unit-cost counts of word-RAM routines',
    verbs.join('\n'),
    '  help    this, or the flags of a verb: help count',
    'FILE is a routine in tally notation, or - for standard input.',
    'Exit: 0 good; 1 a claim or check failed; 2 wrong use or a routine with errors; 3 a run that failed.',
  ].join('\n\n')
}

function helpVerb({ name, summary, example, flags }: Verb): string {
  const forms = flags.map(flag => `--${flag.name}${flag.value === undefined ? '' : ` ${flag.value}`}`)
  const width = Math.max(...forms.map(form => form.length))
  const lines = flags.map(
    (flag, at) => `  ${forms[at]!.padEnd(width)}  ${flag.help}${flag.many ? '; may be repeated' : ''}`,
  )
  return [`${name}: ${summary}`, `  tallyword ${example}`, lines.join('\n')].join('\n\n')
}
