import { parseArgs } from 'node:util'
import { nearestName } from '../routine'
import { misuse } from './terminal'

export interface Flag {
  readonly name: string
  /** What stands for the value in the help; absent: the flag takes none. */
  readonly value?: string
  readonly help: string
  readonly many?: boolean
}

/** The arguments of one command, sorted: files in order, values by flag. */
export interface Arguments {
  readonly files: readonly string[]
  has(flag: string): boolean
  /** The last value given. */
  value(flag: string): string | undefined
  /** All values given, in order. */
  values(flag: string): readonly string[]
}

/** Sorts the arguments of `verb`; an unknown flag, a missing value or one too many is misuse, with the nearest flag. */
export function sortArguments(verb: string, words: readonly string[], flags: readonly Flag[]): Arguments {
  const options = Object.fromEntries(
    flags.map(({ name, value }) => [
      name,
      { type: value === undefined ? ('boolean' as const) : ('string' as const) },
    ]),
  )
  const { tokens } = parseArgs({ args: [...words], options, allowPositionals: true, strict: false, tokens: true })
  const files: string[] = []
  const given = new Map<string, string[]>()
  for (const token of tokens) {
    if (token.kind === 'positional') files.push(token.value)
    if (token.kind !== 'option') continue
    const flag = flags.find(({ name }) => name === token.name)
    if (!flag || !token.rawName.startsWith('--')) {
      const near = nearestName(token.name, flags.map(({ name }) => name)) // biome-ignore format: one thought
      throw misuse(
        `${verb} has no flag ${token.rawName}`,
        near ? `did you mean --${near}?` : `tallyword help ${verb} lists its flags`,
      )
    }
    if (flag.value === undefined && token.value !== undefined)
      throw misuse(`--${flag.name} takes no value`, `write --${flag.name} alone`)
    if (flag.value !== undefined && (token.value === undefined || token.value.startsWith('--')))
      throw misuse(`--${flag.name} needs a value`, `write --${flag.name} ${flag.value}`)
    const values = given.get(flag.name) ?? []
    if (values.length > 0 && !flag.many) throw misuse(`--${flag.name} is given twice`, 'give it once')
    given.set(flag.name, [...values, token.value ?? ''])
  }
  return {
    files,
    has: flag => given.has(flag),
    value: flag => given.get(flag)?.at(-1),
    values: flag => given.get(flag) ?? [],
  }
}
