/** The legal words of an array, both ends included: the same for all its elements, or each element's own. */
export type Bounds =
  | { readonly kind: 'same'; readonly low: bigint; readonly high: bigint }
  | { readonly kind: 'each'; readonly low: readonly bigint[]; readonly high: readonly bigint[] }

/** The ends of one element. */
export function endsOf(bounds: Bounds, place: number): { low: bigint; high: bigint } {
  if (bounds.kind === 'same') return bounds
  return { low: bounds.low[place]!, high: bounds.high[place]! }
}

/** The words that are legal at every element; `low` above `high` where there are none. */
export function commonEnds(bounds: Bounds): { low: bigint; high: bigint } {
  if (bounds.kind === 'same') return bounds
  const low = bounds.low.reduce((most, end) => (end > most ? end : most))
  const high = bounds.high.reduce((least, end) => (end < least ? end : least))
  return { low, high }
}
