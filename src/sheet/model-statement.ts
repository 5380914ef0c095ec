import type { InstructionSetName } from '../machine'
import { printCharges, printWidth, type Setting } from '../sweep'

const SET_WORDS: Readonly<Record<InstructionSetName, string>> = {
  full: 'with multiplication',
  'no-multiply': 'without multiplication',
  'add-only': 'by addition alone',
  extended: 'with every class of operation',
}

/** What every export says of its figures. */
export const UNIT_COST_NOTE =
  'Counts are unit-cost operations of a word-RAM at the charges given: not cycles, not seconds. Times on a real part are measured on it.'

/**
 * The setting as one sentence: the statement of the model under which the figures hold. `sizes` are the routine's, in
 * order; a size without a range of its own takes the first's.
 */
export function stateModel(setting: Setting, sizes: readonly string[]): string {
  const widths = setting.widths.map(printWidth).join(', ')
  const sets = setting.sets.map(set => SET_WORDS[set]).join(' and ')
  const charged = printCharges(setting.charges)
  const ranges = sizes.flatMap(size => {
    const range = setting.sizes[size]
    return range ? [`${size} = ${range.text}`] : []
  })
  const lets = Object.entries(setting.lets).map(([name, value]) => `${name} = ${value}`)
  const parts = [
    `On a word-RAM with w = ${widths}`,
    sets,
    setting.off === 'expand' ? 'classes that are off expanded and counted' : '',
    charged === 'unit' ? 'every operation charged 1' : `charged ${charged}`,
    ranges.length > 0 ? `for ${ranges.join(' and ')}` : '',
    lets.length > 0 ? `with ${lets.join(', ')}` : '',
    `on ${setting.pattern} input`,
    `${setting.trials} ${setting.trials === 1 ? 'trial' : 'trials'} a point`,
    `seed ${setting.seed}`,
  ]
  return `${parts.filter(part => part !== '').join(', ')}.`
}
