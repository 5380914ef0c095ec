import type { InstructionSetName } from '../../machine/machine'
import type { SweepRecord } from '../store/record'

/** A row of the grid: the points of one width under one instruction set, by size. */
export interface GridRow {
  readonly set: InstructionSetName
  /** Place in `setting.widths`. */
  readonly width: number
  /** Index of the row's first point; the others follow. */
  readonly first: number
}

export interface Arrangement {
  readonly rows: readonly GridRow[]
  readonly columns: number
}

/** The grid's order is sets, then widths, then sizes: each row is a stretch of it. */
export function arrange({ points, setting }: Pick<SweepRecord, 'points' | 'setting'>): Arrangement {
  const rows = setting.sets.length * setting.widths.length
  const columns = rows > 0 ? points.length / rows : 0
  return {
    columns,
    rows: setting.sets.flatMap((set, setPlace) =>
      setting.widths.map((_, width) => ({
        set,
        width,
        first: (setPlace * setting.widths.length + width) * columns,
      })),
    ),
  }
}

/** Where a key leads from a point; undefined for keys that lead nowhere. */
export function step(key: string, at: number, { rows, columns }: Arrangement): number | undefined {
  const column = at % columns
  const row = Math.floor(at / columns)
  const to = (nextRow: number, nextColumn: number) =>
    Math.max(0, Math.min(rows.length - 1, nextRow)) * columns + Math.max(0, Math.min(columns - 1, nextColumn))
  switch (key) {
    case 'ArrowLeft':
      return to(row, column - 1)
    case 'ArrowRight':
      return to(row, column + 1)
    case 'ArrowUp':
      return to(row - 1, column)
    case 'ArrowDown':
      return to(row + 1, column)
    case 'Home':
      return to(row, 0)
    case 'End':
      return to(row, columns - 1)
    case 'PageUp':
      return to(0, column)
    case 'PageDown':
      return to(rows.length - 1, column)
    default:
      return undefined
  }
}
