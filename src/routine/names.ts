/** The name of `known` that is nearest to `name` by letters put in, left out, changed or swapped, if one is near. */
export function nearestName(name: string, known: Iterable<string>): string | undefined {
  const sought = name.toLowerCase()
  let nearest: string | undefined
  let least = Number.POSITIVE_INFINITY
  for (const candidate of known) {
    const longest = Math.max(name.length, candidate.length)
    const allowed = Math.min(longest - 1, Math.max(1, Math.floor(longest / 3)), least - 1)
    if (candidate === name || Math.abs(name.length - candidate.length) > allowed) continue
    const distance = editDistance(sought, candidate.toLowerCase(), allowed)
    if (distance > allowed || differsInDigits(name, candidate)) continue
    nearest = candidate
    least = distance
  }
  return nearest
}

/** `x1` is no slip of `x2`: numbered names are told apart on purpose. */
function differsInDigits(a: string, b: string): boolean {
  return /\d/.test(a + b) && a.replace(/\d+/g, '') === b.replace(/\d+/g, '')
}

/** Optimal string alignment distance: a swap of neighbours counts one. Some number past `most` where it passes that. */
function editDistance(a: string, b: string, most: number): number {
  let before: number[] = []
  let above = Array.from({ length: b.length + 1 }, (_, j) => j)
  for (let i = 1; i <= a.length; i++) {
    const row = [i]
    let least = i
    for (let j = 1; j <= b.length; j++) {
      const change = above[j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1)
      let distance = Math.min(above[j]! + 1, row[j - 1]! + 1, change)
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1])
        distance = Math.min(distance, before[j - 2]! + 1)
      row.push(distance)
      least = Math.min(least, distance)
    }
    // A swap reaches back two rows, and adds one.
    if (least > most + 1) return least
    before = above
    above = row
  }
  return above[b.length]!
}
