import type { Mark } from './lines'
import { markSpan } from './lines'
import type { Notes } from './notes'
import type { Exact, WordExpression } from './tree'

/** Longer than any word of 4096 bits, in any notation; longer literals are slips of the hand. */
const MOST_DIGITS = 6000

/** Whether a literal has a decimal point. */
function isDecimal(image: string): boolean {
  return image.includes('.') && !/^0[xX]/.test(image)
}

function isPlain(image: string): boolean {
  return /^(?:0|[1-9][0-9]*)$/.test(image)
}

function refuseLength(mark: Mark, notes: Notes): void {
  notes.refuse(
    markSpan(mark),
    `This number has ${mark.image.length} digits; no word is that long.`,
    `Write at most ${MOST_DIGITS} digits.`,
  )
}

/** A literal of word code: a whole number, decimal, hexadecimal (`0x`) or binary (`0b`). */
export function readWordNumeral(mark: Mark, notes: Notes): WordExpression {
  const span = markSpan(mark)
  const { image } = mark
  if (image.length > MOST_DIGITS) {
    refuseLength(mark, notes)
    return { kind: 'number', value: 0n, span }
  }
  if (isDecimal(image)) {
    notes.refuse(
      span,
      `\`${image}\` is no whole number, and a word holds whole numbers alone.`,
      'Scale the values so that they are whole, or move the number into a declaration (`fix`, `let`).',
    )
    return { kind: 'number', value: 0n, span }
  }
  const value = BigInt(image.replaceAll('_', ''))
  return isPlain(image) ? { kind: 'number', value, span } : { kind: 'number', value, written: image, span }
}

/** A literal of an exact expression: as in word code, and decimals with a point, which stand for exact fractions. */
export function readExactNumeral(mark: Mark, notes: Notes): Exact {
  const span = markSpan(mark)
  const { image } = mark
  if (image.length > MOST_DIGITS) {
    refuseLength(mark, notes)
    return { kind: 'number', numerator: 0n, denominator: 1n, span }
  }
  if (!isDecimal(image)) {
    const numerator = BigInt(image.replaceAll('_', ''))
    const number = { kind: 'number', numerator, denominator: 1n, span } as const
    return isPlain(image) ? number : { ...number, written: image }
  }
  const [whole, part] = image.replaceAll('_', '').split('.') as [string, string]
  let numerator = BigInt(whole + part)
  let denominator = 10n ** BigInt(part.length)
  for (const factor of [2n, 5n])
    while (denominator % factor === 0n && numerator % factor === 0n) {
      denominator /= factor
      numerator /= factor
    }
  return { kind: 'number', numerator, denominator, span }
}
