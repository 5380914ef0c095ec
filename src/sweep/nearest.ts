/** The word of `known` that is nearest to `word` by letters put in, left out, changed or swapped, if it is near. */
export function nearestName(word: string, known: readonly string[]): string | undefined {
  const near = known
    .map(name => ({ name, distance: editDistance(word.toLowerCase(), name.toLowerCase()) }))
    .filter(({ name, distance }) => {
      const length = Math.max(name.length, word.length)
      return distance < length && distance <= Math.max(1, Math.floor(length / 3))
    })
  return near.sort((a, b) => a.distance - b.distance)[0]?.name
}

/** Optimal string alignment distance (swaps of neighbours count one); words here are short. */
function editDistance(a: string, b: string): number {
  const rows: number[][] = [Array.from({ length: b.length + 1 }, (_, j) => j)]
  for (let i = 1; i <= a.length; i++) {
    const row = [i]
    for (let j = 1; j <= b.length; j++) {
      const above = rows[i - 1]!
      let least = Math.min(above[j]! + 1, row[j - 1]! + 1, above[j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1))
      const swapped = i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]
      if (swapped) least = Math.min(least, rows[i - 2]![j - 2]! + 1)
      row.push(least)
    }
    rows.push(row)
  }
  return rows[a.length]![b.length]!
}
