import { CHARGES, type Charges, type ChargesName } from '../machine/machine'
import { nearestName } from '../routine'
import type { ChargedClass } from '../routine/block'
import { type Misread, splitList } from './misread'

const PRESETS = Object.keys(CHARGES) as ChargesName[]
const CLASSES = Object.keys(CHARGES.unit) as ChargedClass[]

const FORMS = `write ${PRESETS.join(' or ')}, or prices on top of one: multiply=32, move=0`

/** Reads charges: a preset, prices by class on top of `unit`, or a preset and then prices (`operators, multiply=32`). */
export function parseCharges(text: string): { charges: Charges } | Misread {
  const charges: Record<ChargedClass, number> = { ...CHARGES.unit }
  for (const [place, part] of splitList(text).entries()) {
    const preset = PRESETS.find(name => name === part)
    if (preset) {
      if (place > 0)
        return { problem: `the preset ${part} would undo what stands before it`, remedy: `write ${part} first` }
      Object.assign(charges, CHARGES[preset])
      continue
    }
    const price = /^([a-z]+)\s*=\s*(\S+)$/.exec(part)
    if (!price) {
      const meant = nearestName(part, PRESETS)
      return {
        problem: part === '' ? 'the charges have an empty part' : `"${part}" is neither a preset nor a price`,
        remedy: meant ? `write ${meant}` : FORMS,
      }
    }
    const [, name, figure] = price as unknown as [string, string, string]
    const charged = CLASSES.find(known => known === name)
    if (!charged) {
      const meant = nearestName(name, CLASSES)
      return {
        problem: `there is no class ${name}`,
        remedy: meant ? `write ${meant}` : `classes: ${CLASSES.join(', ')}`,
      }
    }
    const value = Number(figure)
    if (!/^\d+$/.test(figure) || !Number.isSafeInteger(value))
      return { problem: `${figure} is no price for ${name}`, remedy: 'a price is a whole number from 0' }
    charges[charged] = value
  }
  return { charges }
}

/** The shortest text that reads back to the same charges: a preset's name, or the preset and what differs from it. */
export function printCharges(charges: Charges): string {
  const texts = PRESETS.map(preset => {
    const prices = CLASSES.filter(name => charges[name] !== CHARGES[preset][name]).map(
      name => `${name}=${charges[name]}`,
    )
    return [preset, ...prices].join(',')
  })
  return texts.reduce((shortest, text) => (text.split(',').length < shortest.split(',').length ? text : shortest))
}
