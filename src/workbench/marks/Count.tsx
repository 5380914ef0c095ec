/** Digits in groups of three from the right. Numbers of up to four digits stand as they are. */
export function digitGroups(digits: string): readonly string[] {
  if (digits.length <= 4) return [digits]
  const first = digits.length % 3 || 3
  const groups = [digits.slice(0, first)]
  for (let at = first; at < digits.length; at += 3) groups.push(digits.slice(at, at + 3))
  return groups
}

/** A whole number. Thousands are set apart by style alone, so that a copy of it is plain digits. */
export function Count({ of }: { readonly of: number | bigint }) {
  const text = String(of)
  const sign = text.startsWith('-') ? '-' : ''
  const [first, ...rest] = digitGroups(text.slice(sign.length))
  let at = 0
  return (
    <span className="count">
      {sign}
      {first}
      {rest.map(group => (
        <i key={at++}>{group}</i>
      ))}
    </span>
  )
}

/** The exponent where `n` is a power of two from 2^5 on: smaller ones read better as they are. */
export function binaryExponent(n: number): number | undefined {
  const exponent = Math.log2(n)
  return Number.isInteger(exponent) && exponent >= 5 ? exponent : undefined
}

/** A size: a power of two as 2 with its exponent (read out and copied as `2^16`), any other number in digits. */
export function SizeValue({ of }: { readonly of: number }) {
  const exponent = binaryExponent(of)
  if (exponent === undefined) return <Count of={of} />
  return (
    <>
      2<span className="sr">^</span>
      <sup>{exponent}</sup>
    </>
  )
}
