// biome-ignore-all lint/correctness/noComponentHookFactories: Chevrotain's alternatives (`ALT`) are no components.
import {
  type DSLMethodOpts,
  EmbeddedActionsParser,
  type IParserErrorMessageProvider,
  type OrMethodOpts,
  type ParserMethod,
  tokenLabel,
} from './chevrotain'
import { type Mark, markSpan } from './lines'
import { arrangeParts, type Part, type Phrase } from './phrase'
import { joinSpans } from './span'
import * as T from './tokens'

/** What an operand may begin with, in plain words. */
const OPERAND = 'a name, a number or `(`'

/** Messages say what was expected, in plain words; what was found is the line reader's to say. */
const expectations: IParserErrorMessageProvider = {
  buildMismatchTokenMessage: ({ expected }) => tokenLabel(expected),
  buildNotAllInputParsedMessage: () => 'the end of the line',
  buildNoViableAltMessage: ({ customUserDescription }) => customUserDescription ?? OPERAND,
  buildEarlyExitMessage: ({ customUserDescription }) => customUserDescription ?? '',
}

function roundedPhrase(mark: Mark, operand: Phrase, right: Mark): Phrase {
  return { kind: 'rounded', mark, operand, span: joinSpans(markSpan(mark), markSpan(right)) }
}

/** Parses expressions and conditions, of word code and exact alike, as far as their shape goes. */
export class PhraseParser extends EmbeddedActionsParser {
  /**
   * Whether `sum i in` opens a sum. Set before a line is parsed; false for the first line of a `for`, where names and
   * the words between them may come in that order (`for i from sum to in`).
   */
  quantifiers = true
  /** The name just taken. Read before any other rule begins. */
  private head: Mark | undefined
  // Alternatives of the rules that run most, made once.
  private operands: OrMethodOpts<Phrase> | undefined
  private continuation: DSLMethodOpts<Phrase> | undefined

  constructor() {
    super([...T.VOCABULARY], { maxLookahead: 2, recoveryEnabled: false, errorMessageProvider: expectations })
  }

  /** An expression or condition, as far as it reaches. */
  readonly phrase = this.RULE('phrase', (): Phrase => {
    const parts: Part[] = []
    this.SUBRULE(this.operand, { ARGS: [parts] })
    this.MANY(() => {
      parts.push(this.CONSUME(T.Infix) as Mark)
      this.SUBRULE2(this.operand, { ARGS: [parts] })
    })
    return this.ACTION(() => arrangeParts(parts))
  })

  /** The body of a `sum`: ends where a condition would begin. */
  private readonly arithmetic = this.RULE('arithmetic', (): Phrase => {
    const parts: Part[] = []
    this.SUBRULE(this.operand, { ARGS: [parts] })
    this.MANY(() => {
      parts.push(this.CONSUME(T.Arithmetic) as Mark)
      this.SUBRULE2(this.operand, { ARGS: [parts] })
    })
    return this.ACTION(() => arrangeParts(parts))
  })

  private readonly operand: ParserMethod<[Part[]], void> = this.RULE('operand', (parts: Part[]): void => {
    this.MANY(() => {
      const mark = this.CONSUME(T.Prefix) as Mark
      this.ACTION(() => parts.push(mark))
    })
    this.operands ??= {
      DEF: [
        { ALT: () => this.SUBRULE(this.numeral) },
        { ALT: () => this.SUBRULE(this.named) },
        { ALT: () => this.SUBRULE(this.group) },
        { ALT: () => this.SUBRULE(this.indirect) },
        { ALT: () => this.SUBRULE(this.rounded) },
      ],
      ERR_MSG: OPERAND,
    }
    const phrase = this.OR<Phrase>(this.operands)
    this.ACTION(() => parts.push(phrase))
  })

  private readonly numeral = this.RULE('numeral', (): Phrase => {
    const mark = this.CONSUME(T.Numeral) as Mark
    return this.ACTION(() => ({ kind: 'number', mark, span: markSpan(mark) }))
  })

  private readonly group = this.RULE('group', (): Phrase => {
    const left = this.CONSUME(T.LeftParen) as Mark
    const inner = this.SUBRULE(this.phrase)
    const right = this.CONSUME(T.RightParen) as Mark
    return this.ACTION(() => ({ ...inner, span: joinSpans(markSpan(left), markSpan(right)) }))
  })

  protected readonly indirect = this.RULE('indirect', (): Phrase => {
    const left = this.CONSUME(T.LeftSquare) as Mark
    const address = this.SUBRULE(this.phrase)
    const right = this.CONSUME(T.RightSquare) as Mark
    return this.ACTION(() => ({ kind: 'indirect', address, span: joinSpans(markSpan(left), markSpan(right)) }))
  })

  private readonly rounded = this.RULE('rounded', (): Phrase => {
    return this.OR<Phrase>([
      {
        ALT: () => {
          const mark = this.CONSUME(T.LeftCeil) as Mark
          const operand = this.SUBRULE(this.phrase)
          const right = this.CONSUME(T.RightCeil) as Mark
          return this.ACTION(() => roundedPhrase(mark, operand, right))
        },
      },
      {
        ALT: () => {
          const mark = this.CONSUME(T.LeftFloor) as Mark
          const operand = this.SUBRULE2(this.phrase)
          const right = this.CONSUME(T.RightFloor) as Mark
          return this.ACTION(() => roundedPhrase(mark, operand, right))
        },
      },
    ])
  })

  /** What begins with a name: the name alone, an element, a call, a quantifier. */
  protected readonly named: ParserMethod<[], Phrase> = this.RULE('named', (): Phrase => {
    const mark = this.CONSUME(T.Name) as Mark
    this.head = mark
    this.continuation ??= {
      // A name after a name goes on in `sum i in` alone.
      GATE: () => !T.isOf(this.LA(1).tokenType, T.Name) || this.quantifies(),
      DEF: () => this.SUBRULE(this.suffix, { ARGS: [this.head!] }),
    }
    const phrase = this.OPTION(this.continuation)
    return phrase ?? this.ACTION(() => ({ kind: 'name', mark, span: markSpan(mark) }))
  })

  private quantifies(): boolean {
    return this.quantifiers && T.isOf(this.head!.tokenType, T.Quantifier) && this.LA(2).tokenType === T.In
  }

  private readonly suffix: ParserMethod<[Mark], Phrase> = this.RULE('suffix', (mark: Mark): Phrase => {
    return this.OR<Phrase>([
      { ALT: () => this.SUBRULE(this.quantified, { ARGS: [mark] }) },
      { ALT: () => this.SUBRULE(this.call, { ARGS: [mark] }) },
      {
        ALT: () => {
          const base: Phrase = this.ACTION(() => ({ kind: 'name', mark, span: markSpan(mark) }))
          return this.SUBRULE(this.elements, { ARGS: [base] })
        },
      },
    ])
  })

  private readonly call: ParserMethod<[Mark], Phrase> = this.RULE('call', (mark: Mark): Phrase => {
    const values: Phrase[] = []
    this.CONSUME(T.LeftParen)
    this.MANY_SEP({ SEP: T.Comma, DEF: () => values.push(this.SUBRULE(this.phrase)) })
    const right = this.CONSUME(T.RightParen) as Mark
    const call: Phrase = this.ACTION(() => ({
      kind: 'call',
      mark,
      arguments: values,
      span: joinSpans(markSpan(mark), markSpan(right)),
    }))
    return this.OPTION(() => this.SUBRULE(this.elements, { ARGS: [call] })) ?? call
  })

  /** `[i]` after what it indexes, once or, wrongly, more often. */
  private readonly elements: ParserMethod<[Phrase], Phrase> = this.RULE('elements', (base: Phrase): Phrase => {
    let phrase = base
    this.AT_LEAST_ONE(() => {
      this.CONSUME(T.LeftSquare)
      const index = this.SUBRULE(this.phrase)
      const right = this.CONSUME(T.RightSquare) as Mark
      this.ACTION(() => {
        phrase = { kind: 'element', base: phrase, index, span: joinSpans(phrase.span, markSpan(right)) }
      })
    })
    return phrase
  })

  private readonly quantified: ParserMethod<[Mark], Phrase> = this.RULE('quantified', (mark: Mark): Phrase => {
    const index = this.CONSUME(T.Name) as Mark
    this.CONSUME(T.In)
    const from = this.SUBRULE(this.phrase)
    this.CONSUME(T.Range)
    const to = this.SUBRULE2(this.phrase)
    this.CONSUME(T.Colon)
    const body = this.OR([
      { GATE: () => mark.tokenType === T.Sum, ALT: () => this.SUBRULE(this.arithmetic) },
      { ALT: () => this.SUBRULE3(this.phrase), IGNORE_AMBIGUITIES: true },
    ])
    return this.ACTION(() => ({
      kind: 'quantified',
      mark,
      index,
      from,
      to,
      body,
      span: joinSpans(markSpan(mark), body.span),
    }))
  })
}
