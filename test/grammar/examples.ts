/** A point at which an example is run, and what is said of that run. */
export interface Expectation {
  /** For titles: the entry's first part. */
  readonly title: string
  readonly point: ReadonlyMap<string, string>
  readonly input: ReadonlyMap<string, readonly bigint[]>
  readonly output: ReadonlyMap<string, readonly bigint[]>
  /** All classes, where any is listed. */
  readonly classes?: ReadonlyMap<string, number>
  readonly time?: number
  readonly index?: number
  readonly lines: ReadonlyMap<number, ReadonlyMap<string, number>>
  readonly space: ReadonlyMap<string, number>
  readonly fails?: { readonly kind: string; readonly value?: bigint }
  readonly refused: boolean
}

export interface Example {
  readonly text: string
  /** Line of the page on which the example begins. */
  readonly line: number
  readonly expectations: readonly Expectation[]
  readonly error?: string
  readonly layoutFree: boolean
}

/** The examples of a page's text: blocks fenced as `tally`, each with the block fenced as `run` that follows it. */
export function readExamples(page: string): Example[] {
  const block = /^```tally\n([\s\S]*?)^```\n\n(<!-- layout free -->\n\n)?(?:```run\n([\s\S]*?)^```\n)?/gm
  return [...page.matchAll(block)].map(({ 0: whole, 1: text, 2: free, 3: runs, index }) => {
    const line = page.slice(0, index).split('\n').length
    if (runs === undefined) throw new Error(`line ${line}: no runs stand below this example: ${whole}`)
    const entries = runs.replace(/\n +/g, ' ').trim().split('\n')
    const error = entries
      .find(entry => entry.startsWith('error:'))
      ?.slice('error:'.length)
      .trim()
    return {
      text: text!,
      line,
      expectations: entries.filter(entry => !entry.startsWith('error:')).map(readExpectation),
      ...(error !== undefined && { error }),
      layoutFree: free !== undefined,
    }
  })
}

const CLASS_LIST = /^(?:add|logic|shift|multiply|divide|bitscan|load|store|move|compare|jump|call) /

function readExpectation(entry: string): Expectation {
  const [head, ...clauses] = entry.split(';').map(clause => clause.trim())
  const expectation = {
    title: head!,
    point: new Map(head!.split(' ').map(pair => pair.split('=') as [string, string])),
    input: new Map<string, readonly bigint[]>(),
    output: new Map<string, readonly bigint[]>(),
    lines: new Map<number, ReadonlyMap<string, number>>(),
    space: new Map<string, number>(),
    refused: false,
  } as { -readonly [Key in keyof Expectation]: Expectation[Key] }
  for (const clause of clauses) {
    const [, word, rest] = /^(\S+) ?(.*)$/.exec(clause)!
    const line = /^line (\d+): (.*)$/.exec(clause)
    if (word === 'input') expectation.input = readWords(rest!)
    else if (word === 'output') expectation.output = readWords(rest!)
    else if (word === 'time') expectation.time = Number(rest)
    else if (word === 'index') expectation.index = Number(rest)
    else if (word === 'space') expectation.space = readCounts(rest!)
    else if (word === 'refused') expectation.refused = true
    else if (word === 'fails') {
      const [kind, value] = rest!.split(' ')
      expectation.fails = { kind: kind!, ...(value !== undefined && { value: BigInt(value) }) }
    } else if (line)
      (expectation.lines as Map<number, ReadonlyMap<string, number>>).set(Number(line[1]), readCounts(line[2]!))
    else if (CLASS_LIST.test(clause)) expectation.classes = readCounts(clause)
    else throw new Error(`unknown clause: ${clause}`)
  }
  return expectation
}

/** `a = 1 2 3, x = 5`. */
function readWords(text: string): Map<string, readonly bigint[]> {
  return new Map(
    text.split(',').map(part => {
      const [name, words] = part.split('=').map(side => side.trim())
      return [name!, words!.split(' ').filter(Boolean).map(BigInt)]
    }),
  )
}

/** `add 8, load 4`. */
function readCounts(text: string): Map<string, number> {
  return new Map(
    text.split(',').map(part => {
      const [name, count] = part.trim().split(' ')
      if (!name || !/^\d+$/.test(count ?? '')) throw new Error(`no count: ${part}`)
      return [name, Number(count)]
    }),
  )
}
