import { describe, expect, test } from 'vitest'
import { findClaims, summariseClaims } from '../../src/workbench/tables/claims'
import { pointRows, sortRows } from '../../src/workbench/tables/point-rows'
import { classRows, expandedWords, talliesAt } from '../../src/workbench/tables/tally-table'
import { SCALE, swept } from './swept'

const record = await swept(SCALE, '1, 4, 8', '4, 8', { sets: ['full', 'no-multiply'] })
const expanded = await swept(SCALE, '4, 8', '8', { sets: ['full', 'no-multiply'], off: 'expand' })

describe('findings on claims', () => {
  const findings = findClaims(record)

  test('stand in the order of their lines, with their text', () => {
    expect(findings.map(({ line, text }) => [line, text])).toEqual([
      [4, 'claim time <= 6*n + 4'],
      [5, 'claim time = 6*n + 3'],
      [6, 'claim time <= 5*n'],
      [7, 'claim space <= 3'],
      [8, 'check all i in 0..n-1 : a[i] = floor(old(a)[i] * m / 2^w)'],
    ])
  })

  test('tell the nearest point of a claim that holds, with both sides', () => {
    const [first] = findings
    expect(first!.outcome).toBe('holds')
    expect(`${first!.before} n = ${first!.at!.point.n}${first!.after}`).toBe(
      'At 6 points; nearest at n = 8: 51 against 52.',
    )
  })

  test('tell the first point that fails: smallest n, then w', () => {
    const broken = findings[2]!
    expect(broken.outcome).toBe('broken')
    expect([broken.at!.point.n, broken.at!.point.width]).toEqual([1, 4])
    expect(broken.after).toBe(': 9 against 5. 6 points fail of 6, all with multiplication.')
  })

  test('count the tallies of a check', () => {
    expect(findings[4]).toMatchObject({ outcome: 'holds', before: 'In all 6 tallies of 6 points.' })
  })

  test('sum up', () => {
    expect(summariseClaims(findings, false)).toBe('4 hold, 1 is broken.')
    expect(summariseClaims(findings, true)).toBe('4 hold, 1 is broken so far.')
    expect(summariseClaims([], false)).toBe('The draft makes none.')
  })
})

describe('tallies at a point', () => {
  test('stand side by side, one an instruction set', () => {
    const tallies = talliesAt(expanded, { point: 3, trial: 0 })
    expect(tallies.map(({ set }) => set)).toEqual(['full', 'no-multiply'])
    expect(tallies[0]!.time).toBe(51)
    expect(Number(tallies[1]!.time)).toBeGreaterThan(51)
    const multiply = classRows(tallies).find(row => row.class === 'multiply')
    expect(multiply?.counts).toEqual([8, 0])
    expect(classRows(tallies).map(row => row.class)).not.toContain('divide')
    expect(expandedWords(tallies[1]!.tally!.expanded![0]!)).toMatch(
      /^line 11: multiply expanded, 8 uses, \d+(\.\d)? operations a use$/,
    )
  })

  test('leave a refused set without a count', () => {
    expect(talliesAt(record, { point: 0, trial: 0 })[1]).toEqual({ set: 'no-multiply' })
  })
})

describe('rows of points', () => {
  const rows = pointRows(record)

  test('hold every point of the grid, those that were not run with the reason', () => {
    expect(rows).toHaveLength(12)
    expect(rows[0]).toMatchObject({ outcome: 'broken', least: 9, mean: 9, most: 9, working: 3, trials: 1 })
    expect(rows[11]).toMatchObject({ outcome: 'refused', trials: 0 })
    expect(rows[11]!.reason).toContain('line 11 uses multiply')
  })

  test('are sorted by a column both ways, alike rows in the order of the grid', () => {
    const down = sortRows(rows, 'n', true).map(row => row.point.n)
    expect(down).toEqual([...down].sort((a, b) => b - a))
    const up = sortRows(rows, 'w', false)
    expect(up.map(row => row.point.width)).toEqual([4, 4, 4, 4, 4, 4, 8, 8, 8, 8, 8, 8])
    expect(up.slice(0, 6).map(row => row.point.index)).toEqual([0, 1, 2, 6, 7, 8])
  })
})
