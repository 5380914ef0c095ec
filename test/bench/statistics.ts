export function median(values: readonly number[]): number {
  const sorted = values.toSorted((x, y) => x - y)
  const middle = sorted.length >> 1
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2
}

/** How times compare with others taken in the same rounds. */
export interface Ratio {
  /** Of the rounds' ratios. */
  readonly median: number
  readonly least: number
  readonly most: number
  /** The least time of all to the least other time of all: what a busy machine disturbs least. */
  readonly best: number
}

export function compareTimes(times: readonly number[], others: readonly number[]): Ratio {
  const ratios = times.map((time, round) => time / others[round]!)
  return {
    median: median(ratios),
    least: Math.min(...ratios),
    most: Math.max(...ratios),
    best: Math.min(...times) / Math.min(...others),
  }
}

export function ratioText({ median, least, most, best }: Ratio): string {
  return `${median.toFixed(2)} (${least.toFixed(2)} .. ${most.toFixed(2)}; best ${best.toFixed(2)})`
}

/** Milliseconds as text. */
export const ms = (time: number) => `${time.toFixed(time < 10 ? 2 : 1)} ms`
