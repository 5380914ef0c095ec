/** The name of `known` that is nearest to `name` by letters put in, left out, changed or swapped, if one is near. */
export function nearestName(name: string, known: Iterable<string>): string | undefined {
  let nearest: string | undefined
  let least = Number.POSITIVE_INFINITY
  for (const candidate of known) {
    if (candidate === name || differsInDigits(name, candidate)) continue
    const longest = Math.max(name.length, candidate.length)
    const distance = editDistance(name.toLowerCase(), candidate.toLowerCase())
    if (distance < longest && distance <= Math.max(1, Math.floor(longest / 3)) && distance < least) {
      nearest = candidate
      least = distance
    }
  }
  return nearest
}

/** `x1` is no slip of `x2`: numbered names are told apart on purpose. */
function differsInDigits(a: string, b: string): boolean {
  return /\d/.test(a + b) && a.replace(/\d+/g, '') === b.replace(/\d+/g, '')
}

/** Optimal string alignment distance: a swap of neighbours counts one. */
function editDistance(a: string, b: string): number {
  let before: number[] = []
  let above = Array.from({ length: b.length + 1 }, (_, j) => j)
  for (let i = 1; i <= a.length; i++) {
    const row = [i]
    for (let j = 1; j <= b.length; j++) {
      const change = above[j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1)
      row.push(Math.min(above[j]! + 1, row[j - 1]! + 1, change))
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1])
        row[j] = Math.min(row[j]!, before[j - 2]! + 1)
    }
    before = above
    above = row
  }
  return above[b.length]!
}
