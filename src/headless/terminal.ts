/** Where a command reads and writes: the process's own streams, or a test's. */
export interface Terminal {
  /** The folder that relative paths start from. */
  readonly folder: string
  /** Writes a line to standard output. */
  readonly print: (text: string) => void
  /** Writes a line to standard error. */
  readonly complain: (text: string) => void
  /** Rewrites the line that shows progress, or takes it away; undefined where nobody watches. */
  readonly progress?: (text: string | undefined) => void
  readonly readInput: () => Promise<string>
}

/** What a command ends with; the shell sees its value. */
export const EXIT = {
  good: 0,
  /** A claim or a check is broken, or could not be decided. */
  broken: 1,
  /** Wrong use, a routine with errors, or a point that is not run. */
  usage: 2,
  /** A run that failed. */
  failed: 3,
} as const
export type Exit = (typeof EXIT)[keyof typeof EXIT]

/** Ends a command early with a message for standard error. Thrown by the verbs, caught in one place: `runCommand`. */
export class Leave extends Error {
  constructor(
    readonly exit: Exit,
    message: string,
  ) {
    super(message)
  }
}

/** Wrong use of a command: what is wrong, and what to write instead. */
export function misuse(problem: string, remedy: string): Leave {
  return new Leave(EXIT.usage, `tallyword: ${problem}; ${remedy}`)
}
