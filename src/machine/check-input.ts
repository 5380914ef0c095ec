import type { Binding, Input } from './run'

/** What is wrong with an input for a binding, in a sentence; undefined where nothing is. */
export function checkInput(binding: Binding, input: Input): string | undefined {
  const { routine } = binding.program
  const { width } = binding.point
  for (const [at, { name, role }] of routine.arrays.entries()) {
    if (role !== 'in' && role !== 'inout') continue
    const words = input.arrays[name]
    if (!words) return `input array ${name} is missing`
    const { length } = binding.arrays[at]!
    if (words.length !== length)
      return `input array ${name} has ${words.length} words, and ${length} are declared here`
    for (let place = 0; place < length; place++) {
      const word = BigInt(words[place]!)
      if (BigInt.asUintN(width, word) !== word)
        return `${name}[${place}] = ${word} does not fit a word of ${width} bits`
    }
  }
  for (const { name, role } of routine.scalars) {
    if (role === 'out') continue
    const word = input.scalars[name]
    if (word === undefined) return `input ${name} is missing`
    if (BigInt.asUintN(width, word) !== word) return `${name} = ${word} does not fit a word of ${width} bits`
  }
  return undefined
}
