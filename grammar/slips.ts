import { editsFix, replaceFix } from './edits'
import { EXACT_NAMES } from './exact'
import { type Mark, markSpan } from './lines'
import { type Break, LINE_END, type Recogniser } from './slip'
import * as T from './tokens'
import { WORD_NAMES } from './word'

const RESERVED: ReadonlySet<string> = new Set(T.RESERVED_WORDS)
/** Closing signs, and what opens each. */
const BRACKETS: Readonly<Record<string, string>> = { ')': '(', ']': '[', '⌉': '⌈', '⌋': '⌊' }

/** An operand may end with it. */
function endsOperand(mark: Mark | undefined): mark is Mark {
  if (!mark) return false
  const type = mark.tokenType
  return type === T.Numeral || T.isOf(type, T.Name) || type === T.RightParen || type === T.RightSquare
}

function beginsOperand(mark: Mark | undefined): mark is Mark {
  if (!mark) return false
  const type = mark.tokenType
  return type === T.Numeral || T.isOf(type, T.Name) || type === T.LeftParen
}

function touches(left: Mark, right: Mark): boolean {
  return left.startOffset + left.image.length === right.startOffset
}

/** Whether the parser would have taken an operator where it stopped. */
function expectsOperator({ expected }: Break): boolean {
  return expected === LINE_END || (expected.length === 3 && Object.hasOwn(BRACKETS, expected[1]!))
}

function margin({ line }: Break): string {
  return ' '.repeat(line.column - 1)
}

const isCondition: ReadonlySet<unknown> = new Set([T.If, T.While, T.Until, T.Else, T.Need, T.Check, T.Assert])

/** Slips within the notation, the surest first. */
export const SLIPS: readonly Recogniser[] = [
  function reservedVariable({ tokens }) {
    const [first, second] = tokens
    if (!first || !second || !RESERVED.has(first.image) || !T.isOf(second.tokenType, T.Assign)) return undefined
    return {
      span: markSpan(first),
      message: `\`${first.image}\` is a word of the notation and cannot name a variable.`,
      remedy: 'Take another name.',
    }
  },

  function numberLabel({ tokens, at }) {
    const found = tokens[at]
    if (found?.tokenType !== T.Numeral) return undefined
    const label = at === 0 ? tokens[1]?.tokenType === T.Colon : tokens[at - 1]?.tokenType === T.Goto
    if (!label) return undefined
    const text = `L${found.image}`
    return {
      message: 'A label is a name, and begins with a letter.',
      remedy: `Write \`${text}\`, at the label and at every jump to it.`,
      fix: replaceFix(`Write \`${text}\``, markSpan(found), text),
    }
  },

  function lineNumber({ tokens, at }) {
    const [first, second] = tokens
    if (at !== 0 || first?.tokenType !== T.Numeral || !second || touches(first, second)) return undefined
    if (T.isOf(second.tokenType, T.Infix) || T.isOf(second.tokenType, T.Assign)) return undefined
    return {
      message: 'Lines carry no numbers in the text.',
      remedy: 'Delete the number.',
      fix: replaceFix('Delete the number', { start: first.startOffset, end: second.startOffset }, ''),
    }
  },

  function elseOnOneLine(broken) {
    const { tokens, at } = broken
    if (tokens[0]?.tokenType !== T.If || tokens[at]?.tokenType !== T.Else) return undefined
    const before = markSpan(tokens[at - 1]!)
    const next = tokens[at + 1]
    return {
      message: 'A line with `goto` has no `else`: where the condition is false, the next line follows.',
      remedy: 'Write what is to happen then on the next line.',
      ...(next && {
        fix: replaceFix('Begin a new line', { start: before.end, end: next.startOffset }, `\n${margin(broken)}`),
      }),
    }
  },

  function instructionAfterCondition(broken) {
    const { tokens, at, line, text } = broken
    const found = tokens[at]
    if (tokens[0]?.tokenType !== T.If || !found) return undefined
    const first = found.tokenType === T.Colon ? tokens[at + 1] : found
    if (!first) return undefined
    const arrow = tokens.findIndex((token, place) => place > at && T.isOf(token.tokenType, T.Assign))
    const acts = [T.Halt, T.Return].includes(first.tokenType) || (arrow > 0 && T.isOf(first.tokenType, T.Name))
    const before = tokens[at - 1]
    if (!acts || !before) return undefined
    const body = text.slice(first.startOffset, line.end)
    return {
      span: { ...markSpan(first), end: line.end },
      message: 'Only `goto L` may follow a condition on its line.',
      remedy: 'Write the instruction on the next line, and `end` below it.',
      fix: replaceFix(
        'Make it a block',
        { start: markSpan(before).end, end: line.end },
        `\n${margin(broken)}  ${body}\n${margin(broken)}end`,
      ),
    }
  },

  function arrowInCondition({ tokens, at }) {
    const found = tokens[at]
    if (found?.tokenType !== T.Arrow || !isCondition.has(tokens[0]?.tokenType)) return undefined
    return {
      message: '`<-` is the arrow of an assignment, and a condition assigns nothing.',
      remedy: 'Put a blank between `<` and `-` where less than a negative is meant; write `=` to compare.',
      ...(found.image === '<-' && { fix: replaceFix('Write `< -`', markSpan(found), '< -') }),
    }
  },

  function secondArrow({ tokens, at }) {
    const found = tokens[at]
    if (!found || found.tokenType !== T.Arrow || at < 2) return undefined
    if (!tokens.slice(0, at).some(token => T.isOf(token.tokenType, T.Assign))) return undefined
    return {
      message: 'An instruction has one arrow.',
      remedy: 'Write one line for each variable that is set.',
    }
  },

  function missingComma({ tokens, at }) {
    const found = tokens[at]
    const before = tokens[at - 1]
    if (![T.In, T.Out, T.Inout, T.Work].includes(tokens[0]!.tokenType) || !found || !before) return undefined
    if (!T.isOf(found.tokenType, T.Name) || !endsOperand(before) || at < 2) return undefined
    if (/^(?:u?int\d*|u\d+|i\d+|word|integer|unsigned|array)$/i.test(before.image))
      return {
        span: markSpan(before),
        message: `\`${before.image}\` says nothing here: every input and result is a word, or an array of words.`,
        remedy: 'Leave it out.',
        fix: replaceFix('Leave it out', { start: before.startOffset, end: found.startOffset }, ''),
      }
    const end = markSpan(before).end
    return {
      message: `A comma is missing between \`${before.image}\` and \`${found.image}\`.`,
      remedy: 'Write `,` between what is declared.',
      fix: editsFix('Insert `,`', [{ start: end, end, text: ',' }]),
    }
  },

  function secondLet(broken) {
    const { tokens, at } = broken
    const found = tokens[at]
    const next = tokens[at + 1]
    if (tokens[0]?.tokenType !== T.Let || found?.tokenType !== T.Comma || !next) return undefined
    return {
      message: 'A `let` line declares one tunable.',
      remedy: 'Write a `let` line for each.',
      fix: replaceFix(
        'Begin a new `let` line',
        { start: found.startOffset, end: next.startOffset },
        `\n${margin(broken)}let `,
      ),
    }
  },

  function feedWords(broken) {
    const { tokens, at } = broken
    const found = tokens[at]
    if (tokens[0]?.tokenType !== T.Feed || !found) return undefined
    const name = tokens[1]?.image ?? 'a'
    const start = markSpan(tokens[at - 1]!).end
    if (found.tokenType === T.Distinct)
      return {
        message: 'A `feed` line says one thing.',
        remedy: `Write \`feed ${name} distinct\` on a line of its own.`,
        fix: replaceFix(
          'Write two lines',
          { start, end: markSpan(found).end },
          `\n${margin(broken)}feed ${name} distinct`,
        ),
      }
    if (found.tokenType === T.In)
      return {
        message: 'A `feed` line says one thing.',
        remedy: `Write \`feed ${name} in F .. T\` on a line of its own.`,
        fix: replaceFix('Write two lines', { start, end: found.startOffset }, `\n${margin(broken)}feed ${name} `),
      }
    const to = tokens.find((token, place) => place > at && token.tokenType === T.To)
    if (found.tokenType !== T.From || !to) return undefined
    const edits = [
      { ...pick(found), text: 'in' },
      { ...pick(to), text: '..' },
    ]
    return {
      message: 'A legal range is written with `in` and `..`.',
      remedy: `Write \`feed ${name} in F .. T\`.`,
      fix: editsFix('Write `in` and `..`', edits),
    }
  },

  function measure({ tokens, at }) {
    const found = tokens[at]
    if (tokens[0]?.tokenType !== T.Claim || at !== 1 || !found) return undefined
    const text = /^(?:op|step|cost|count|run)/i.test(found.image)
      ? 'time'
      : /^(?:word|mem|storage)/i.test(found.image)
        ? 'space'
        : undefined
    if (!text) return undefined
    return {
      message: `A claim is about \`time\` (operations) or \`space\` (words), not \`${found.image}\`.`,
      remedy: `Write \`${text}\`.`,
      fix: replaceFix(`Write \`${text}\``, markSpan(found), text),
    }
  },

  function commaInCondition({ tokens, at }) {
    const found = tokens[at]
    if (found?.tokenType !== T.Comma || !isCondition.has(tokens[0]?.tokenType)) return undefined
    return {
      message: 'Conditions are joined with words, not with a comma.',
      remedy: 'Write `and` or `or`.',
      fix: replaceFix('Write `and`', markSpan(found), ' and'),
    }
  },

  function missingColon({ tokens, at, expected }) {
    const before = tokens[at - 1]
    if (expected !== '`:`' || !before) return undefined
    const end = markSpan(before).end
    return {
      message: 'A `:` is missing between the range and what it is for.',
      remedy: 'Write `sum i in F .. T : E`; the same with `all` and `any`.',
      fix: editsFix('Insert `:`', [{ start: end, end, text: ' :' }]),
    }
  },

  function numberThenName(broken) {
    const { tokens, at } = broken
    const found = tokens[at]
    const before = tokens[at - 1]
    if (!found || before?.tokenType !== T.Numeral || !T.isOf(found.tokenType, T.Name)) return undefined
    const close = touches(before, found)
    if (!close && !expectsOperator(broken)) return undefined
    const span = { ...markSpan(before), end: markSpan(found).end }
    if (before.image === '0' && close && /^[xXbBoO]/.test(found.image))
      return {
        span,
        message: `\`${before.image}${found.image}\` is no number.`,
        remedy: 'Write digits 0-9 and a-f after `0x`, and 0 and 1 after `0b`.',
      }
    return {
      span,
      message: `An operator is missing between \`${before.image}\` and \`${found.image}\`.`,
      remedy: `Write \`${before.image}*${found.image}\`, if the product is meant.`,
      fix: replaceFix('Insert `*`', { start: markSpan(before).end, end: found.startOffset }, '*'),
    }
  },

  function functionWithoutBrackets({ tokens, at }) {
    const found = tokens[at]
    const before = tokens[at - 1]
    if (!found || !before || !(WORD_NAMES.has(before.image) || EXACT_NAMES.has(before.image))) return undefined
    if (found.tokenType !== T.Numeral && !T.isOf(found.tokenType, T.Name)) return undefined
    const span = { ...markSpan(before), end: markSpan(found).end }
    const text = `${before.image}(${found.image})`
    return {
      span,
      message: `\`${before.image}\` takes what it works on in brackets.`,
      remedy: `Write \`${text}\`.`,
      fix: replaceFix(`Write \`${text}\``, span, text),
    }
  },

  function logarithmBesideFactor({ tokens, at }) {
    const found = tokens[at]
    const before = tokens[at - 1]
    const next = tokens[at + 1]
    if (!found || !endsOperand(before) || !/^(?:lg|log|log2)$/.test(found.image) || !beginsOperand(next))
      return undefined
    const bracket = next.tokenType === T.LeftParen
    const text = bracket ? ' * lg' : ` * lg(${next.image})`
    const end = bracket ? markSpan(found).end : markSpan(next).end
    return {
      span: { ...markSpan(found), end },
      message: 'A product is written with `*`, and what a logarithm is of in brackets.',
      remedy: 'Write `n * lg(n)`.',
      fix: replaceFix('Write the product', { start: markSpan(before).end, end }, text),
    }
  },

  function procedureBrackets({ tokens, at, expected }) {
    if (tokens[0]?.tokenType !== T.Procedure || expected !== '`(`' || at < 2) return undefined
    const end = markSpan(tokens[at - 1]!).end
    return {
      message: 'The parameters of a procedure stand in brackets, also where there are none.',
      remedy: 'Write `procedure f(x, y)`, or `procedure f()`.',
      ...(at === tokens.length && { fix: editsFix('Insert `()`', [{ start: end, end, text: '()' }]) }),
    }
  },

  function routineParameters({ tokens, at }) {
    if (tokens[0]?.tokenType !== T.Routine || tokens[at]?.tokenType !== T.LeftParen) return undefined
    const end = markSpan(tokens[tokens.length - 1]!).end
    return {
      message: 'A routine has no parameters.',
      remedy: 'Declare its inputs below with `in`, its results with `out`.',
      fix: replaceFix('Delete the brackets', { start: tokens[at]!.startOffset, end }, ''),
    }
  },

  function missingOperand({ tokens, at, expected }) {
    const last = tokens[tokens.length - 1]
    if (at !== tokens.length || !last || !expected.startsWith('a name, a number')) return undefined
    const type = last.tokenType
    if (!T.isOf(type, T.Infix) && !T.isOf(type, T.Prefix) && !T.isOf(type, T.Assign)) return undefined
    return {
      message: `The line ends after \`${last.image}\`, where something is missing.`,
      remedy: 'Write a name, a number or an expression in brackets after it.',
    }
  },

  function reservedName({ tokens, at, expected }) {
    const found = tokens[at]
    if (!found || !RESERVED.has(found.image) || !expected.startsWith('a name')) return undefined
    if (expected !== 'a name' && [T.And, T.Or, T.Mod, T.Xor].includes(found.tokenType)) return undefined
    return {
      message: `\`${found.image}\` is a word of the notation, and stands where ${expected} was expected.`,
      remedy: `Put what is missing before it; or, if \`${found.image}\` was to be a name, take another one.`,
    }
  },

  function leadingOperator({ tokens, at }) {
    const [first] = tokens
    if (at !== 0 || !first || !T.isOf(first.tokenType, T.Infix)) return undefined
    return {
      message: `The line begins with \`${first.image}\`, which joins it to nothing.`,
      remedy: `End the line before with \`${first.image}\`: a line goes on in the next when it ends in an operator.`,
    }
  },

  function openBracket({ tokens, at, expected }) {
    const found = tokens[at]
    const sign = expected.slice(1, -1)
    const opener = Object.hasOwn(BRACKETS, sign) ? BRACKETS[sign] : undefined
    if (!opener || beginsOperand(found)) return undefined
    let depth = 0
    let place = at - 1
    for (; place >= 0; place--) {
      const { image } = tokens[place]!
      if (image === sign) depth++
      else if (image === opener && depth-- === 0) break
    }
    const open = tokens[place]
    const last = tokens[tokens.length - 1]
    if (found)
      return {
        message: `Found \`${found.image}\` where \`${sign}\` was expected.`,
        remedy: `Close the bracket${open ? ` opened at column ${open.startColumn}` : ''} with \`${sign}\` first.`,
      }
    const end = last ? markSpan(last).end : 0
    return {
      ...(open && { span: markSpan(open) }),
      message: `The bracket \`${opener}\` is not closed.`,
      remedy: `Close it with \`${sign}\`.`,
      fix: editsFix(`Insert \`${sign}\``, [{ start: end, end, text: sign }]),
    }
  },

  function strayBracket({ tokens, at, expected }) {
    const found = tokens[at]
    if (!found || expected !== LINE_END || !Object.hasOwn(BRACKETS, found.image)) return undefined
    return {
      message: `\`${found.image}\` closes nothing.`,
      remedy: 'Delete it, or open the bracket.',
      fix: replaceFix(`Delete \`${found.image}\``, markSpan(found), ''),
    }
  },

  function missingOperator(broken) {
    const { tokens, at } = broken
    const found = tokens[at]
    const before = tokens[at - 1]
    if (at < 2 || !endsOperand(before) || !beginsOperand(found) || !expectsOperator(broken)) return undefined
    if (!tokens.slice(0, at).some(token => T.isOf(token.tokenType, T.Assign) || T.isOf(token.tokenType, T.Infix)))
      return undefined
    return {
      message: `An operator is missing between \`${before.image}\` and \`${found.image}\`.`,
      remedy: 'Write the operator that is meant; begin a new line for a new instruction.',
    }
  },
]

function pick(mark: Mark): { start: number; end: number } {
  return { start: mark.startOffset, end: mark.startOffset + mark.image.length }
}
