export interface Column {
  readonly title: string
  /** Numbers stand to the right. */
  readonly align: 'left' | 'right'
}

/** Rows under their titles, columns two blanks apart, nothing trailing. */
export function layTable(columns: readonly Column[], rows: readonly (readonly string[])[], indent = ''): string {
  const widths = columns.map(({ title }, at) =>
    Math.max(...[title, ...rows.map(row => row[at] ?? '')].map(lengthOf)),
  )
  const layRow = (cells: readonly string[]) =>
    (indent + columns.map(({ align }, at) => pad(cells[at] ?? '', widths[at]!, align)).join('  ')).trimEnd()
  return [columns.map(({ title }) => title), ...rows].map(layRow).join('\n')
}

function pad(cell: string, width: number, align: 'left' | 'right'): string {
  const blanks = ' '.repeat(Math.max(0, width - lengthOf(cell)))
  return align === 'right' ? blanks + cell : cell + blanks
}

/** In characters, not in UTF-16 units. */
function lengthOf(text: string): number {
  return [...text].length
}

/** A count beside its bound, which is exact text: digits are grouped where it is a whole number. */
export function sayFigures(count: number, bound: string): string {
  return `${groupDigits(count)} against ${/^\d+$/.test(bound) ? groupDigits(BigInt(bound)) : bound}`
}

/** 1234567 as 1,234,567. */
export function groupDigits(value: number | bigint): string {
  return String(value).replace(/\B(?=(\d{3})+$)/g, ',')
}
