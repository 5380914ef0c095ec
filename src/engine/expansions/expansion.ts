import type { InstructionSet, SwitchedClass } from '../../machine'
import { type BinaryFunction, type Program, readProgram, type UnaryFunction } from '../../routine'
import { EXPANSION_TEXTS } from './texts'

/** What a machine may lack: a function of one or two words, or the two-word product. */
export type ExpandedFunction = Exclude<BinaryFunction | UnaryFunction, 'add' | 'subtract' | 'negate'> | 'product'

/** A routine that stands in for a function: its text, and its blocks, of which procedure 1 is the one to call. */
export interface Expansion {
  readonly function: ExpandedFunction
  readonly text: string
  readonly program: Program
}

type TextName = keyof typeof EXPANSION_TEXTS

/** Texts that are shorter in operations where a further class is on, best first. */
const BETTER: Partial<Record<ExpandedFunction, { readonly text: TextName; readonly with: SwitchedClass }>> = {
  multiply: { text: 'multiply with shift', with: 'shift' },
  popcount: { text: 'popcount with logic', with: 'logic' },
}

const read = new Map<TextName, Program>()

/** The stand-in for a function on a machine with this instruction set; it uses only classes that are on. */
export function expansionFor(name: ExpandedFunction, set: InstructionSet): Expansion {
  const better = BETTER[name]
  const chosen: TextName = better && set.on.has(better.with) ? better.text : name
  const text = EXPANSION_TEXTS[chosen]
  let program = read.get(chosen)
  if (!program) {
    const reading = readProgram(text)
    if (!reading.program) throw new Error(`${chosen}: ${reading.diagnostics.map(each => each.message).join('; ')}`)
    program = reading.program
    read.set(chosen, program)
  }
  return { function: name, text, program }
}
