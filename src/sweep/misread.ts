/** A part of a setting that cannot be read: what is wrong, and what to write instead. */
export interface Misread {
  readonly problem: string
  readonly remedy: string
}

/** Parts at commas that stand outside parentheses, blanks at their ends taken off. */
export function splitList(text: string): string[] {
  const parts: string[] = []
  let depth = 0
  let part = ''
  for (const character of text) {
    if (character === '(') depth++
    if (character === ')') depth--
    if (character === ',' && depth <= 0) {
      parts.push(part.trim())
      part = ''
    } else part += character
  }
  parts.push(part.trim())
  return parts
}
