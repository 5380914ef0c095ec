import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import {
  parseCondition,
  parseExact,
  parseText,
  printCondition,
  printExact,
  printRoutine,
} from '../../grammar/index'
import { bare, condition, exact, routine } from './trees'

describe('printing, then parsing, gives the same tree', () => {
  test('of exact expressions', () => {
    fc.assert(
      fc.property(exact, tree => {
        const { exact, diagnostics } = parseExact(printExact(tree))
        expect(diagnostics).toEqual([])
        expect(bare(exact)).toEqual(bare(tree))
      }),
      { numRuns: 500 },
    )
  })

  test('of exact conditions', () => {
    fc.assert(
      fc.property(condition, tree => {
        const read = parseCondition(printCondition(tree))
        expect(read.diagnostics).toEqual([])
        expect(bare(read.condition)).toEqual(bare(tree))
      }),
      { numRuns: 500 },
    )
  })

  test('of routines, whatever they hold; and printing again changes nothing', () => {
    fc.assert(
      fc.property(routine, tree => {
        const text = printRoutine(tree)
        const { routines, diagnostics } = parseText(text)
        expect(diagnostics).toEqual([])
        expect(bare(routines)).toEqual([bare(tree)])
        expect(printRoutine(routines[0]!)).toBe(text)
      }),
      { numRuns: 400 },
    )
  })
})
