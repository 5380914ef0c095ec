import { type Misread, splitList } from './misread'
import type { SizeRange } from './setting'

/** More sizes than this in one range are taken for a slip of the pen. */
const MOST_VALUES = 100_000

const FORMS = 'write 2^6..2^16 (doubling), 100..1000 by 100, a list such as 8, 16, 100, or any of these by commas'

/** Reads sizes: `2^6..2^16` doubles, `100..1000 by 100` steps, `8, 16, 100` lists, and any mixture by commas. */
export function parseSizes(text: string): { range: SizeRange } | Misread {
  const values = parseValues(text, 'a size', FORMS)
  return 'problem' in values ? values : { range: { text: text.trim(), values: values.values } }
}

/** Whole numbers by the same rules, for whatever they stand for (`what`: with its article); sorted, no repeats. */
export function parseValues(text: string, what: string, forms: string): { values: number[] } | Misread {
  if (text.trim() === '') return { problem: `${what} is missing`, remedy: forms }
  const values = new Set<number>()
  for (const part of splitList(text)) {
    if (part === '') return { problem: `nothing stands between two commas in ${quote(text)}`, remedy: forms }
    const read = parsePart(part, what, forms)
    if ('problem' in read) return read
    for (const value of read.values) values.add(value)
    if (values.size > MOST_VALUES)
      return { problem: `${quote(part)} makes more than ${MOST_VALUES} values`, remedy: 'take a larger step' }
  }
  return { values: [...values].sort((a, b) => a - b) }
}

/** One value, or a range. */
function parsePart(part: string, what: string, forms: string): { values: number[] } | Misread {
  const range = /^(.*?)\s*(?:\.\.+|…)\s*(.*?)(?:\s+by\s+(.*))?$/i.exec(part)
  if (!range) {
    const value = parseWhole(part, what, forms)
    return typeof value === 'number' ? { values: [value] } : value
  }
  const ends = [range[1]!, range[2]!, range[3] ?? '1'].map(end => parseWhole(end, what, forms))
  for (const end of ends) if (typeof end !== 'number') return end
  const [from, to, step] = ends as [number, number, number]
  if (from > to) return { problem: `${quote(part)} runs down`, remedy: `write ${range[2]}..${range[1]}` }
  const doubles = range[3] === undefined
  if (doubles && from === 0) return { problem: `${quote(part)} would double 0`, remedy: `write 1..${range[2]}` }
  if (!doubles && step === 0) return { problem: `${quote(part)} never moves on`, remedy: 'write a step from 1 on' }
  const values: number[] = []
  for (let value = from; value <= to; value = doubles ? value * 2 : value + step) {
    values.push(value)
    if (values.length > MOST_VALUES)
      return { problem: `${quote(part)} makes more than ${MOST_VALUES} values`, remedy: 'take a larger step' }
  }
  return { values }
}

const WHOLE = /^(\d[\d_]*)(?:\s*\^\s*(\d[\d_]*))?(?:\s*([+-])\s*(\d[\d_]*))?$/

/** `1024`, `1_000`, `2^10`, `2^10 - 1`. */
export function parseWhole(text: string, what: string, forms: string): number | Misread {
  const match = WHOLE.exec(text.trim())
  if (!match) return { problem: `${quote(text)} is not ${what}`, remedy: forms }
  const [base, power, sign, offset] = [match[1]!, match[2], match[3], match[4]].map(part =>
    part?.replaceAll('_', ''),
  )
  if (/^0\d/.test(base!))
    return { problem: `${quote(text)} begins with 0`, remedy: 'write thousands without commas: 1000 or 1_000' }
  if (power !== undefined && Number(power) > 64) return { problem: `${quote(text)} is too large`, remedy: forms }
  let value = BigInt(base!) ** BigInt(power ?? '1')
  if (offset !== undefined) value += sign === '-' ? -BigInt(offset) : BigInt(offset)
  if (value < 0n) return { problem: `${quote(text)} is below 0`, remedy: forms }
  if (value > BigInt(Number.MAX_SAFE_INTEGER)) return { problem: `${quote(text)} is past 2^53`, remedy: forms }
  return Number(value)
}

function quote(text: string): string {
  return `"${text.trim()}"`
}
