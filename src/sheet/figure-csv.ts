/** A point as a figure draws it. */
export interface FigureRow {
  readonly n: number
  readonly width: number
  readonly set: string
  /** What is drawn: `operations`, `operations over the claim`, `working words` ... */
  readonly quantity: string
  readonly mean: number
  readonly least: number
  readonly most: number
  readonly verdict: string
}

const TITLES = ['n', 'w', 'set', 'quantity', 'mean', 'least', 'most', 'verdict'] as const

/** The points of a figure as CSV (RFC 4180: CRLF, quotes where needed, one line of titles). Least and most are over trials. */
export function writeFigureCsv(rows: readonly FigureRow[]): string {
  const lines = rows.map(row => [
    row.n,
    row.width,
    row.set,
    row.quantity,
    row.mean,
    row.least,
    row.most,
    row.verdict,
  ])
  return [[...TITLES], ...lines].map(cells => `${cells.map(quoteCell).join(',')}\r\n`).join('')
}

function quoteCell(cell: string | number): string {
  const text = String(cell)
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text
}
