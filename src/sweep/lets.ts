import { type Misread, splitList } from './misread'

const FORMS = 'write name=value: k=8, m=2^4'

/** Reads values of lets: `k=8`, `k=8, m=0x10`, `k=2^4`. Whether the routine has them is for the caller to say. */
export function parseLets(text: string): { lets: Record<string, bigint> } | Misread {
  const lets: Record<string, bigint> = {}
  for (const part of splitList(text)) {
    const match = /^([A-Za-z_][A-Za-z0-9_]*)\s*=\s*(.+)$/.exec(part)
    if (!match) return { problem: `"${part}" is no value of a let`, remedy: FORMS }
    const [, name, figure] = match as unknown as [string, string, string]
    const value = parseFigure(figure)
    if (value === undefined) return { problem: `"${figure}" is no value for ${name}`, remedy: FORMS }
    if (Object.hasOwn(lets, name)) return { problem: `${name} is given twice`, remedy: 'give each let once' }
    lets[name] = value
  }
  return { lets }
}

/** Powers past this are no values of word code: the widest word has 4096 bits. */
const MOST_POWER = 4096

function parseFigure(figure: string): bigint | undefined {
  if (/^(\d[\d_]*|0x[0-9a-f_]+)$/i.test(figure)) return BigInt(figure.replaceAll('_', ''))
  const power = /^(\d+)\s*\^\s*(\d+)$/.exec(figure)
  if (!power || Number(power[2]) > MOST_POWER) return undefined
  return BigInt(power[1]!) ** BigInt(power[2]!)
}
