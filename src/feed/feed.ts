import type { Binding, Input } from '../machine/run'
import type { FeedDeclaration, Words } from '../routine'
import { drawWord } from './draw'
import { openSource } from './generator'
import { drawArray, type FeedPattern } from './pattern'
import { boundsOf } from './range'
import { hashText } from './seed'

/**
 * Makes the input of a bound program: every in and inout array by the pattern, every in and inout scalar uniformly, all
 * within the ranges that the routine declares. The same binding, pattern and seed give the same words. A feed that cannot
 * be met is a problem that names the input and the reason.
 */
export function feedInput(
  binding: Binding,
  pattern: FeedPattern,
  seed: number,
): { input: Input } | { problem: string } {
  const { routine } = binding.program
  const { width } = binding.point
  const arrays: Record<string, Words> = {}
  for (const [number, { name, role }] of routine.arrays.entries()) {
    if (role !== 'in' && role !== 'inout') continue
    const { length } = binding.arrays[number]!
    // A range and `distinct` are lines of their own.
    const feeds = routine.feeds.filter(feed => feed.name === name)
    const bounds = boundsOf(rangeOf(feeds), binding, length)
    if ('problem' in bounds) return { problem: `feed: ${name} ${bounds.problem}` }
    const order = { width, length, bounds, distinct: feeds.some(({ distinct }) => distinct) }
    const drawn = drawArray(pattern, order, openSource(seed, name))
    if ('problem' in drawn) return { problem: `feed: ${name} ${drawn.problem}` }
    arrays[name] = drawn.words
  }
  const scalars: Record<string, bigint> = {}
  for (const { name, role } of routine.scalars) {
    if (role === 'out') continue
    const bounds = boundsOf(rangeOf(routine.feeds.filter(feed => feed.name === name)), binding)
    if ('problem' in bounds) return { problem: `feed: ${name} ${bounds.problem}` }
    if (bounds.kind === 'same') scalars[name] = drawWord(bounds.low, bounds.high, openSource(seed, name))
  }
  return { input: { arrays, scalars, junk: junkOf(seed) } }
}

function rangeOf(feeds: readonly FeedDeclaration[]): FeedDeclaration['range'] {
  return feeds.find(({ range }) => range)?.range
}

/** The seed of the junk that goes with a run's input. */
export function junkOf(seed: number): number {
  return hashText(`${seed};junk`)
}
