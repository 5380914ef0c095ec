import { parseExact } from '../../grammar'
import { MAX_WIDTH, MIN_WIDTH } from '../machine/machine'
import { ceilWhole, evaluateExact, isProblem, namesInExact, type Scope } from '../routine'
import { type Misread, splitList } from './misread'
import type { WidthChoice } from './setting'
import { parseValues } from './sizes'

const FORMS = 'write 64, a list such as 16, 32, 64, a range such as 2..16 by 1, or an expression such as 2*lg(n)'

/** What numbers, powers and ranges are made of; anything else is an expression. */
const NUMERIC = /^[\d_\s^+\-.…]*(by[\d_\s^+-]*)?$/i

/**
 * Reads widths: numbers and ranges as sizes are written, and expressions in the sizes, by commas, in the order
 * written. `sizes`, where given, are the names that an expression may use.
 */
export function parseWidths(text: string, sizes?: readonly string[]): { widths: WidthChoice[] } | Misread {
  if (text.trim() === '') return { problem: 'the word width is missing', remedy: FORMS }
  const widths: WidthChoice[] = []
  const add = (choice: WidthChoice) => {
    const key = printWidth(choice)
    if (!widths.some(known => printWidth(known) === key)) widths.push(choice)
  }
  for (const part of splitList(text)) {
    const read = NUMERIC.test(part) ? parseFixed(part) : parseTied(part, sizes)
    if ('problem' in read) return read
    for (const choice of read.widths) add(choice)
  }
  return { widths }
}

/** A width as its user wrote it. */
export function printWidth(choice: WidthChoice): string {
  return choice.kind === 'fixed' ? String(choice.width) : choice.text
}

function parseFixed(part: string): { widths: WidthChoice[] } | Misread {
  const read = parseValues(part, 'a width', FORMS)
  if ('problem' in read) return read
  const wrong = read.values.find(width => width < MIN_WIDTH || width > MAX_WIDTH)
  if (wrong !== undefined)
    return { problem: `no word has ${wrong} bits here`, remedy: `write widths from ${MIN_WIDTH} to ${MAX_WIDTH}` }
  return { widths: read.values.map(width => ({ kind: 'fixed', width })) }
}

function parseTied(part: string, sizes: readonly string[] | undefined): { widths: WidthChoice[] } | Misread {
  const { exact, diagnostics } = parseExact(part)
  const error = diagnostics.find(({ severity }) => severity === 'error')
  if (error || !exact)
    return { problem: `"${part}" is no width: ${error?.message ?? 'it is empty'}`, remedy: error?.remedy ?? FORMS }
  const stranger = [...namesInExact(exact)].find(name => sizes && !sizes.includes(name))
  if (stranger !== undefined)
    return {
      problem: `"${part}" uses ${stranger}, which is no size of the routine`,
      remedy: sizes?.length
        ? `write an expression in ${sizes.join(', ')}`
        : 'write a number: the routine has no sizes',
    }
  return { widths: [{ kind: 'tied', text: part, expression: exact }] }
}

/**
 * The width at the given sizes, an expression's value taken up to the next whole number; or why there is none: it
 * cannot be worked out, or no word has that many bits.
 */
export function widthAt(
  choice: WidthChoice,
  sizes: Readonly<Record<string, number>>,
): { width: number } | { problem: string } {
  if (choice.kind === 'fixed') return { width: choice.width }
  const scope: Scope = {
    number: name => (sizes[name] === undefined ? undefined : BigInt(sizes[name])),
    content: () => undefined,
  }
  const value = evaluateExact(choice.expression, scope)
  const bits = isProblem(value) ? value : ceilWhole(value)
  if (isProblem(bits)) return { problem: `w = ${choice.text} cannot be worked out: ${bits.message}` }
  if (bits < MIN_WIDTH || bits > MAX_WIDTH)
    return { problem: `w = ${choice.text} is ${bits}, and words have ${MIN_WIDTH} to ${MAX_WIDTH} bits` }
  return { width: Number(bits) }
}
