import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import {
  parseCondition,
  parseExact,
  parseText,
  printCondition,
  printExact,
  printRoutine,
  printWord,
  printWordCondition,
  type Span,
  type Statement,
  type WordExpression,
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

describe('the span of every part covers what it is', () => {
  /** The text of a span, without brackets around all of it and with single blanks. */
  const textAt = (text: string, { start, end }: Span): string => {
    const part = text.slice(start, end).replace(/\s+/g, ' ')
    const lone = /^\([^()]*\)$/.test(part) || (part.startsWith('(') && closes(part))
    return lone ? part.slice(1, -1) : part
  }
  /** Whether the bracket that opens a text closes at its end. */
  const closes = (part: string): boolean => {
    let open = 0
    for (const [at, sign] of [...part].entries()) {
      if (sign === '(') open++
      else if (sign === ')' && --open === 0) return at === part.length - 1
    }
    return false
  }

  test('in routines of any shape', () => {
    fc.assert(
      fc.property(routine, tree => {
        const text = printRoutine(tree)
        const check = (found: Span, printed: string): void => {
          expect(textAt(text, found)).toBe(textAt(printed, { start: 0, end: printed.length, line: 1, column: 1 }))
        }
        const words = (expression: WordExpression): void => {
          check(expression.span, printWord(expression))
          if (expression.kind === 'binary') [expression.left, expression.right].forEach(words)
          else if ('operand' in expression) words(expression.operand)
          else if (expression.kind === 'element') words(expression.index)
          else if (expression.kind === 'indirect') words(expression.address)
        }
        const statements = (body: readonly Statement[]): void => {
          for (const statement of body) {
            if (statement.kind === 'assign') {
              check(statement.target.span, printWord(statement.target))
              words(statement.value)
            } else if (statement.kind === 'if-goto') {
              check(statement.condition.span, printWordCondition(statement.condition))
              check(statement.label.span, statement.label.text)
            } else if (statement.kind === 'assert')
              check(statement.condition.span, printCondition(statement.condition))
            else if (statement.kind === 'if') for (const branch of statement.branches) statements(branch.body)
            else if ('body' in statement) statements(statement.body)
          }
        }
        const [read] = parseText(text).routines
        statements(read!.body)
        for (const declaration of read!.declarations) {
          if (declaration.kind === 'let') check(declaration.value.span, printExact(declaration.value))
          else if (declaration.kind === 'check')
            check(declaration.condition.span, printCondition(declaration.condition))
          else if (declaration.kind === 'procedure') statements(declaration.body)
        }
      }),
      { numRuns: 200 },
    )
  })
})
