import { describe, expect, test } from 'vitest'
import { type Diagnostic, parseText } from '../../grammar/index'
import { DECLARATIONS, INSTRUCTIONS, type Slip, TEXTS } from './slips'

function applyFix(text: string, { fix }: Diagnostic): string {
  let fixed = text
  for (const { start, end, text: put } of [...fix!.edits].sort((a, b) => b.start - a.start))
    fixed = fixed.slice(0, start) + put + fixed.slice(end)
  return fixed
}

function checkSlip([text, message, fixed]: Slip, around: (text: string) => string): void {
  const whole = around(text)
  const { diagnostics } = parseText(whole)
  const [first] = diagnostics
  expect(first?.message).toMatch(message)
  expect(first?.remedy).not.toBe('')
  if (fixed === undefined) return
  expect(diagnostics).toHaveLength(1)
  const after = applyFix(whole, first!)
  expect(after).toBe(around(fixed))
  expect(parseText(after).diagnostics).toEqual([])
}

describe('a slip among the instructions', () => {
  const around = (text: string): string => `routine r\n  in a[n], i\n  out s\nbegin\n  ${text}\nL:\nend\n`
  test.each(INSTRUCTIONS.map(slip => [slip[0], slip] as const))('%s', (_, slip) => checkSlip(slip, around))
})

describe('a slip among the declarations', () => {
  const around = (text: string): string => `routine r\n  ${text}\nbegin\n  halt\nend\n`
  test.each(DECLARATIONS.map(slip => [slip[0], slip] as const))('%s', (_, slip) => checkSlip(slip, around))
})

describe('a slip of a whole text', () => {
  test.each(TEXTS.map(slip => [slip[0], slip] as const))('%j', (_, slip) => checkSlip(slip, text => text))
})
