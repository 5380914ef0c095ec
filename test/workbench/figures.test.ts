import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { CHARGES } from '../../src/machine/machine'
import { compareSets } from '../../src/workbench/figures/captions'
import { spreadLabels } from '../../src/workbench/figures/end-labels'
import { boundPoints, doubleOfText, plotSeries, shownClaim, timeOf } from '../../src/workbench/figures/series'
import { planAxis } from '../../src/workbench/figures/ticks'
import { SCALE, swept } from './swept'

const record = await swept(SCALE, '1, 4, 8', '4, 8', { sets: ['full', 'no-multiply'] })
const expanded = await swept(SCALE, '4, 8', '8', { sets: ['full', 'no-multiply'], off: 'expand' })
const time = (tally: Parameters<typeof timeOf>[0]) => timeOf(tally, CHARGES.unit)

describe('series', () => {
  test('run along n, one a width and set that has counts', () => {
    const series = plotSeries(record, 'n', 8, time)
    expect(series.map(({ label, points }) => [label, points.map(({ x, y }) => [x, y])])).toEqual([
      [
        '4 with',
        [
          [1, 9],
          [4, 27],
          [8, 51],
        ],
      ],
      [
        '8 with',
        [
          [1, 9],
          [4, 27],
          [8, 51],
        ],
      ],
    ])
  })

  test('run along w at one size, one a set', () => {
    const series = plotSeries(expanded, 'w', 8, time)
    expect(series.map(({ label, points }) => [label, points.map(({ x }) => x)])).toEqual([
      ['with', [8]],
      ['without', [8]],
    ])
  })

  test('show the claim that is broken before one that holds, and its bound', () => {
    expect(shownClaim(record, 'time')).toBe(2)
    expect(shownClaim(record, 'space')).toBe(3)
    const [series] = plotSeries(record, 'n', 8, time)
    expect(boundPoints(record, series!, 2)).toEqual([
      { x: 1, y: 5 },
      { x: 4, y: 20 },
      { x: 8, y: 40 },
    ])
  })

  test.each([
    ['12', 12],
    ['7/2', 3.5],
    ['3.16227766016837...', 3.16227766016837],
    ['1.5...e20', 1.5e20],
  ])('read the exact text %s as a double', (text, value) => {
    expect(doubleOfText(text)).toBe(value)
  })
})

describe('captions', () => {
  const figure = (result: { trials: readonly { tally: Parameters<typeof timeOf>[0] }[] }) =>
    time(result.trials[0]!.tally)

  test('say why a set has no count', () => {
    expect(compareSets(record, figure)).toBe(
      'Without multiplication no point is counted: line 11 uses multiply, which the instruction set no-multiply lacks.',
    )
  })

  test('give the range of ratios', () => {
    expect(compareSets(expanded, figure)).toMatch(
      /^\d+\.\d+( to \d+\.\d+)? times as many without multiplication\.$/,
    )
  })
})

describe('axes', () => {
  test('mark powers of two where sizes double', () => {
    const sizes = [64, 128, 256, 512, 1024]
    const { ticks, domain } = planAxis(sizes, 'log', 300, { marks: sizes, along: true })
    expect(domain).toEqual([64, 1024])
    expect(ticks.map(({ text, exponent }) => `${text}^${exponent}`)).toEqual(['2^6', '2^7', '2^8', '2^9', '2^10'])
  })

  test('mark powers of ten on counts', () => {
    const { ticks } = planAxis([300, 250000], 'log', 200)
    expect(ticks.map(tick => tick.value)).toEqual([1000, 10000, 100000])
  })

  test('are linear where a value is 0', () => {
    expect(planAxis([0, 10], 'log', 200).scale).toBe('linear')
  })

  test('always hold every value, ticks inside, whatever the values', () => {
    const values = fc.array(fc.oneof(fc.nat(20), fc.integer({ min: 0, max: 2 ** 53 - 1 })), {
      minLength: 1,
      maxLength: 8,
    })
    fc.assert(
      fc.property(
        values,
        fc.constantFrom('log', 'linear'),
        fc.integer({ min: 60, max: 900 }),
        (given, scale, pixels) => {
          const { domain, ticks } = planAxis(given, scale as 'log' | 'linear', pixels, {
            fromZero: scale === 'linear',
          })
          const [low, high] = domain
          for (const value of given) expect(value >= low * (1 - 1e-9) && value <= high * (1 + 1e-9)).toBe(true)
          for (const { value } of ticks) expect(value >= low * (1 - 1e-9) && value <= high * (1 + 1e-9)).toBe(true)
          expect(ticks.length).toBeLessThan(80)
          expect(low).toBeLessThan(high)
        },
      ),
    )
  })
})

describe('labels at the ends of lines', () => {
  test('keep their distance, order and bounds', () => {
    const wanted = fc.array(fc.integer({ min: 0, max: 200 }), { minLength: 1, maxLength: 12 })
    fc.assert(
      fc.property(wanted, places => {
        const placed = spreadLabels(places, 13, 0, 200)
        const sorted = placed.toSorted((a, b) => a - b)
        for (const [at, place] of sorted.entries())
          if (at > 0) expect(place - sorted[at - 1]!).toBeGreaterThanOrEqual(13)
        expect(Math.max(...placed)).toBeLessThanOrEqual(200)
      }),
    )
  })
})
