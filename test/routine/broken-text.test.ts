import { readdirSync, readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { readProgram } from '../../src/routine'

const FOLDERS = ['../bench/', '../outside/']
const TEXTS = FOLDERS.flatMap(folder => {
  const url = new URL(folder, import.meta.url)
  const files = readdirSync(url).filter(file => file.endsWith('.tally'))
  return files.map(file => readFileSync(new URL(file, url), 'utf8'))
})

const PIECES = [
  'a',
  'n',
  'w',
  'x',
  '[',
  ']',
  '(',
  ')',
  '<-',
  ':',
  ',',
  '+',
  '0',
  'if',
  'end',
  'goto',
  'in',
  'out',
  'inout',
  'work',
  'let',
  'fix',
  'feed',
  'check',
  'old',
  'sum',
  'procedure',
  'return',
  'halt',
  'begin',
  'addr',
  'for',
  'to',
  '\n',
  '\n  in a[n]\n',
  '\n  work x\n',
  '\n  halt\n',
  '\n  return x\n',
  '\n  n <- a\n',
  '\n  x <- f(a, 1)\n',
  '\nL:\n',
  '\n  goto L\n',
]

/** A slip of a writer: a stretch taken out, one doubled, or a piece put in. */
const slip = fc.tuple(fc.double({ min: 0, max: 1, noNaN: true }), fc.nat(12), fc.nat(2), fc.constantFrom(...PIECES))

function spoil(text: string, slips: readonly (readonly [number, number, number, string])[]): string {
  return slips.reduce((spoilt, [where, length, kind, piece]) => {
    const at = Math.floor(where * spoilt.length)
    const cut = spoilt.slice(at, at + length)
    const into = kind === 0 ? '' : kind === 1 ? cut + cut : ` ${piece} ${cut}`
    return spoilt.slice(0, at) + into + spoilt.slice(at + length)
  }, text)
}

describe('a spoilt text', () => {
  test('is read without a fault, and its remedies can be carried out', () => {
    expect(TEXTS.length).toBeGreaterThan(5)
    fc.assert(
      fc.property(fc.constantFrom(...TEXTS), fc.array(slip, { minLength: 1, maxLength: 4 }), (text, slips) => {
        const spoilt = spoil(text, slips)
        const { program, diagnostics } = readProgram(spoilt)
        const errors = diagnostics.filter(({ severity }) => severity === 'error')
        expect(program !== undefined || errors.length > 0).toBe(true)
        for (const { span, message, remedy, fix, path = [] } of diagnostics) {
          expect(message).not.toBe('')
          expect(remedy).not.toBe('')
          for (const place of [span, ...path.map(step => step.span)]) {
            expect(place.start >= 0 && place.start <= place.end && place.end <= spoilt.length).toBe(true)
            expect(spoilt.slice(0, place.start).split(/\r\n|\n|\r/).length).toBe(place.line)
          }
          if (!fix) continue
          let fixed = spoilt
          let last = spoilt.length
          for (const { start, end, text: into } of [...fix.edits].sort((a, b) => b.start - a.start)) {
            expect(0 <= start && start <= end && end <= last).toBe(true)
            fixed = fixed.slice(0, start) + into + fixed.slice(end)
            last = start
          }
          expect(fixed).not.toBe(spoilt)
          readProgram(fixed)
        }
      }),
      { numRuns: 300 },
    )
  })
})
