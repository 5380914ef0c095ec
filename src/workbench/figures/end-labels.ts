/** Moves labels apart, downwards from the top, so that no two come closer than `gap`; none leaves low .. high if it can be helped. */
export function spreadLabels(wanted: readonly number[], gap: number, low: number, high: number): number[] {
  const order = wanted.map((y, at) => ({ y, at })).sort((a, b) => a.y - b.y)
  const placed = new Array<number>(wanted.length)
  let next = low
  for (const { y, at } of order) {
    placed[at] = Math.max(y, next)
    next = placed[at]! + gap
  }
  // What was pushed past the bottom moves up again, and pushes those above it.
  let limit = high
  for (const { at } of order.toReversed()) {
    if (placed[at]! <= limit) break
    placed[at] = limit
    limit -= gap
  }
  return placed
}
