/** A routine that is timed against its C twin. Files are NAME.tally and TWIN.c. */
export interface BenchCase {
  readonly name: string
  /** The C twin, where it is not NAME.c. */
  readonly twin?: string
  readonly widths: readonly number[]
  /** Size of the main comparison. */
  readonly n: number
  /** Sizes over which the time per counted operation is shown. */
  readonly growth: readonly number[]
  /** Input words of a size; uniform by default. `random` gives a word of the width. */
  readonly input?: (n: number, random: () => bigint) => bigint[]
  /** What of the result is compared with the twin's: an array's name, or scalars in order. */
  readonly result: string | readonly string[]
}

const doubling = (from: number, to: number) => Array.from({ length: to - from + 1 }, (_, i) => 2 ** (from + i))

export const CASES: readonly BenchCase[] = [
  { name: 'radix', widths: [64, 32], n: 2 ** 20, growth: doubling(8, 22), result: 'a' },
  { name: 'radix-named', twin: 'radix', widths: [64, 32], n: 2 ** 20, growth: [], result: 'a' },
  { name: 'sum', widths: [64, 32], n: 2 ** 22, growth: doubling(8, 24), result: ['lo', 'hi'] },
  { name: 'insertion', widths: [64, 32], n: 2 ** 13, growth: doubling(4, 14), result: 'a' },
  { name: 'merge', widths: [64, 32], n: 2 ** 18, growth: doubling(6, 20), result: 'a' },
  { name: 'gcd', widths: [64, 32], n: 2 ** 15, growth: doubling(4, 18), result: ['sum'] },
  { name: 'product', widths: [64, 32], n: 2 ** 21, growth: doubling(8, 22), result: ['lo', 'hi'] },
  { name: 'sha256', widths: [32], n: 2 ** 17, growth: doubling(4, 19), result: 'h' },
  {
    name: 'fib',
    widths: [64, 32],
    n: 32,
    growth: [5, 10, 15, 20, 25, 30],
    // The size is the place of the Fibonacci number; the array holds it alone.
    input: n => [BigInt(n)],
    result: ['f'],
  },
]
