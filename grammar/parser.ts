// biome-ignore-all lint/correctness/noComponentHookFactories: Chevrotain's alternatives (`ALT`) are no components.
import type { OrMethodOpts } from './chevrotain'
import { type Mark, markSpan } from './lines'
import type { Phrase } from './phrase'
import { PhraseParser } from './phrase-parser'
import { joinSpans, type Span } from './span'
import * as T from './tokens'

/** A name with, for an array, what stands in its brackets. */
export interface ItemForm {
  readonly name: Mark
  readonly length?: Phrase
  readonly span: Span
}

/** One line as the parser finds it: its words in their places, expressions unread. */
export type LineForm =
  | { readonly kind: 'routine'; readonly name: Mark }
  | { readonly kind: 'items'; readonly word: Mark; readonly items: readonly ItemForm[] }
  | { readonly kind: 'let'; readonly name: Mark; readonly equal: Mark; readonly value: Phrase }
  | {
      readonly kind: 'fix'
      readonly name: Mark
      readonly length?: Phrase
      readonly range?: RangeForm
      readonly equal: Mark
      readonly values: readonly Phrase[]
    }
  | { readonly kind: 'need' | 'check'; readonly condition: Phrase }
  | {
      readonly kind: 'feed'
      readonly name: Mark
      readonly index?: Mark
      readonly from: Phrase
      readonly to: Phrase
    }
  | { readonly kind: 'distinct'; readonly name: Mark }
  | { readonly kind: 'claim'; readonly measure: Mark; readonly operator: Mark; readonly bound: Phrase }
  | {
      readonly kind: 'procedure'
      readonly name: Mark
      readonly parameters: readonly Mark[]
      readonly results: readonly Mark[]
    }
  | { readonly kind: 'if'; readonly condition: Phrase; readonly label?: Mark }
  | { readonly kind: 'else'; readonly condition?: Phrase }
  | { readonly kind: 'while' | 'until'; readonly condition: Phrase }
  | {
      readonly kind: 'for'
      readonly variable: Mark
      /** `from`, or what stands in its place. */
      readonly opening: Mark
      readonly from: Phrase
      /** `to`, `downto`, or what stands in its place. */
      readonly direction: Mark
      readonly to: Phrase
      readonly step?: Phrase
    }
  | { readonly kind: 'begin' | 'end' | 'repeat' | 'halt' }
  | { readonly kind: 'goto'; readonly label: Mark }
  | { readonly kind: 'return'; readonly values: readonly Phrase[] }
  | { readonly kind: 'assert'; readonly condition: Phrase }
  /** `arrow` is absent where a place stands alone. */
  | {
      readonly kind: 'assign'
      readonly places: readonly Phrase[]
      readonly arrow?: Mark
      readonly values: readonly Phrase[]
    }

export interface RangeForm {
  readonly index: Mark
  readonly from: Phrase
  readonly to: Phrase
}

/**
 * Parses one line at a time. Blocks are put together from lines elsewhere, so that a broken line costs itself alone
 * and no depth of nesting of forms meets the stack.
 */
export class LineParser extends PhraseParser {
  private places: OrMethodOpts<Phrase> | undefined

  constructor() {
    super()
    this.performSelfAnalysis()
  }

  // Declarations

  readonly routineLine = this.RULE('routineLine', (): LineForm => {
    this.CONSUME(T.Routine)
    return { kind: 'routine', name: this.CONSUME(T.Name) as Mark }
  })

  readonly itemsLine = this.RULE('itemsLine', (): LineForm => {
    const items: ItemForm[] = []
    const word = this.CONSUME(T.Name) as Mark
    this.AT_LEAST_ONE_SEP({ SEP: T.Comma, DEF: () => items.push(this.SUBRULE(this.item)), ERR_MSG: 'a name' })
    return { kind: 'items', word, items }
  })

  private readonly item = this.RULE('item', (): ItemForm => {
    const name = this.CONSUME(T.Name) as Mark
    let form: ItemForm = this.ACTION(() => ({ name, span: markSpan(name) }))
    this.OPTION(() => {
      this.CONSUME(T.LeftSquare)
      const length = this.SUBRULE(this.phrase)
      const right = this.CONSUME(T.RightSquare) as Mark
      this.ACTION(() => {
        form = { name, length, span: joinSpans(markSpan(name), markSpan(right)) }
      })
    })
    return form
  })

  readonly letLine = this.RULE('letLine', (): LineForm => {
    this.CONSUME(T.Let)
    const name = this.CONSUME(T.Name) as Mark
    const equal = this.SUBRULE(this.equal)
    return { kind: 'let', name, equal, value: this.SUBRULE(this.phrase) }
  })

  /** `=`, or an arrow in its place. */
  private readonly equal = this.RULE('equal', (): Mark => {
    return this.OR({
      DEF: [
        { ALT: () => this.CONSUME(T.Equal) as Mark },
        { ALT: () => this.CONSUME(T.Arrow) as Mark },
        { ALT: () => this.CONSUME(T.ColonEqual) as Mark },
        { ALT: () => this.CONSUME(T.DoubleEqual) as Mark },
      ],
      ERR_MSG: '`=`',
    })
  })

  readonly fixLine = this.RULE('fixLine', (): LineForm => {
    const values: Phrase[] = []
    let length: Phrase | undefined
    let range: RangeForm | undefined
    this.CONSUME(T.Fix)
    const name = this.CONSUME(T.Name) as Mark
    this.OPTION(() => {
      this.CONSUME(T.LeftSquare)
      this.OR([
        {
          // `t[sum in in 1..2 : E]` is a length, a sum over an index that is called `in`.
          GATE: () =>
            this.LA(2).tokenType === T.In &&
            !(T.isOf(this.LA(1).tokenType, T.Quantifier) && this.LA(3).tokenType === T.In),
          ALT: () => {
            range = this.SUBRULE(this.range)
          },
          IGNORE_AMBIGUITIES: true,
        },
        {
          ALT: () => {
            length = this.SUBRULE(this.phrase)
          },
        },
      ])
      this.CONSUME(T.RightSquare)
    })
    const equal = this.SUBRULE(this.equal)
    this.AT_LEAST_ONE_SEP({ SEP: T.Comma, DEF: () => values.push(this.SUBRULE2(this.phrase)), ERR_MSG: 'a value' })
    return { kind: 'fix', name, ...(length && { length }), ...(range && { range }), equal, values }
  })

  private readonly range = this.RULE('range', (): RangeForm => {
    const index = this.CONSUME(T.Name) as Mark
    this.CONSUME(T.In)
    const from = this.SUBRULE(this.phrase)
    this.CONSUME(T.Range)
    return { index, from, to: this.SUBRULE2(this.phrase) }
  })

  readonly needLine = this.RULE('needLine', (): LineForm => {
    this.CONSUME(T.Need)
    return { kind: 'need', condition: this.SUBRULE(this.phrase) }
  })

  readonly checkLine = this.RULE('checkLine', (): LineForm => {
    this.CONSUME(T.Check)
    return { kind: 'check', condition: this.SUBRULE(this.phrase) }
  })

  readonly feedLine = this.RULE('feedLine', (): LineForm => {
    let index: Mark | undefined
    this.CONSUME(T.Feed)
    const name = this.CONSUME(T.Name) as Mark
    this.OPTION(() => {
      this.CONSUME(T.LeftSquare)
      index = this.CONSUME2(T.Name) as Mark
      this.CONSUME(T.RightSquare)
    })
    return this.OR<LineForm>({
      DEF: [
        {
          ALT: () => {
            this.CONSUME(T.In)
            const from = this.SUBRULE(this.phrase)
            this.CONSUME(T.Range)
            const to = this.SUBRULE2(this.phrase)
            return { kind: 'feed', name, ...(index && { index }), from, to }
          },
        },
        {
          ALT: () => {
            this.CONSUME(T.Distinct)
            return { kind: 'distinct', name }
          },
        },
      ],
      ERR_MSG: '`in` or `distinct`',
    })
  })

  readonly claimLine = this.RULE('claimLine', (): LineForm => {
    this.CONSUME(T.Claim)
    const measure = this.OR({
      DEF: [{ ALT: () => this.CONSUME(T.Time) as Mark }, { ALT: () => this.CONSUME(T.Space) as Mark }],
      ERR_MSG: '`time` or `space`',
    })
    const operator = this.OR2({
      DEF: [
        { ALT: () => this.CONSUME(T.LessEqual) as Mark },
        { ALT: () => this.CONSUME(T.Equal) as Mark },
        { ALT: () => this.CONSUME(T.Less) as Mark },
        { ALT: () => this.CONSUME(T.WrongLessEqual) as Mark },
        { ALT: () => this.CONSUME(T.DoubleEqual) as Mark },
      ],
      ERR_MSG: '`<=` or `=`',
    })
    return { kind: 'claim', measure, operator, bound: this.SUBRULE(this.phrase) }
  })

  readonly procedureLine = this.RULE('procedureLine', (): LineForm => {
    const parameters: Mark[] = []
    const results: Mark[] = []
    this.CONSUME(T.Procedure)
    const name = this.CONSUME(T.Name) as Mark
    this.CONSUME(T.LeftParen)
    this.MANY_SEP({ SEP: T.Comma, DEF: () => parameters.push(this.CONSUME2(T.Name) as Mark) })
    this.CONSUME(T.RightParen)
    this.OPTION(() => {
      this.CONSUME(T.Gives)
      this.AT_LEAST_ONE_SEP({
        SEP: T.Comma,
        DEF: () => results.push(this.CONSUME3(T.Name) as Mark),
        ERR_MSG: 'a name',
      })
    })
    return { kind: 'procedure', name, parameters, results }
  })

  // Instructions

  readonly ifLine = this.RULE('ifLine', (): LineForm => {
    let label: Mark | undefined
    this.CONSUME(T.If)
    const condition = this.SUBRULE(this.phrase)
    this.OPTION(() => this.CONSUME(T.Then))
    this.OPTION2(() => {
      this.CONSUME(T.Goto)
      label = this.CONSUME(T.Name) as Mark
    })
    return { kind: 'if', condition, ...(label && { label }) }
  })

  readonly elseLine = this.RULE('elseLine', (): LineForm => {
    let condition: Phrase | undefined
    this.CONSUME(T.Else)
    this.OPTION(() => {
      this.CONSUME(T.If)
      condition = this.SUBRULE(this.phrase)
      this.OPTION2(() => this.CONSUME(T.Then))
    })
    return { kind: 'else', ...(condition && { condition }) }
  })

  readonly whileLine = this.RULE('whileLine', (): LineForm => {
    this.CONSUME(T.While)
    const condition = this.SUBRULE(this.phrase)
    this.OPTION(() => this.CONSUME(T.Do))
    return { kind: 'while', condition }
  })

  readonly untilLine = this.RULE('untilLine', (): LineForm => {
    this.CONSUME(T.Until)
    return { kind: 'until', condition: this.SUBRULE(this.phrase) }
  })

  readonly forLine = this.RULE('forLine', (): LineForm => {
    let step: Phrase | undefined
    this.CONSUME(T.For)
    const variable = this.CONSUME(T.Name) as Mark
    const opening = this.OR({
      DEF: [
        { ALT: () => this.CONSUME(T.From) as Mark },
        { ALT: () => this.CONSUME(T.In) as Mark },
        { ALT: () => this.CONSUME(T.Assign) as Mark },
      ],
      ERR_MSG: '`from`',
    })
    const from = this.SUBRULE(this.phrase)
    const direction = this.OR2({
      DEF: [
        { ALT: () => this.CONSUME(T.To) as Mark },
        { ALT: () => this.CONSUME(T.Downto) as Mark },
        { ALT: () => this.CONSUME(T.Range) as Mark },
      ],
      ERR_MSG: '`to` or `downto`',
    })
    const to = this.SUBRULE2(this.phrase)
    this.OPTION(() => {
      this.CONSUME(T.By)
      step = this.SUBRULE3(this.phrase)
    })
    this.OPTION2(() => this.CONSUME(T.Do))
    return { kind: 'for', variable, opening, from, direction, to, ...(step && { step }) }
  })

  readonly beginLine = this.RULE('beginLine', (): LineForm => {
    this.CONSUME(T.Begin)
    return { kind: 'begin' }
  })

  readonly endLine = this.RULE('endLine', (): LineForm => {
    this.CONSUME(T.End)
    return { kind: 'end' }
  })

  readonly repeatLine = this.RULE('repeatLine', (): LineForm => {
    this.CONSUME(T.Repeat)
    return { kind: 'repeat' }
  })

  readonly haltLine = this.RULE('haltLine', (): LineForm => {
    this.CONSUME(T.Halt)
    return { kind: 'halt' }
  })

  readonly gotoLine = this.RULE('gotoLine', (): LineForm => {
    this.CONSUME(T.Goto)
    return { kind: 'goto', label: this.CONSUME(T.Name) as Mark }
  })

  readonly returnLine = this.RULE('returnLine', (): LineForm => {
    const values: Phrase[] = []
    this.CONSUME(T.Return)
    this.MANY_SEP({ SEP: T.Comma, DEF: () => values.push(this.SUBRULE(this.phrase)) })
    return { kind: 'return', values }
  })

  readonly assertLine = this.RULE('assertLine', (): LineForm => {
    this.CONSUME(T.Assert)
    return { kind: 'assert', condition: this.SUBRULE(this.phrase) }
  })

  readonly assignLine = this.RULE('assignLine', (): LineForm => {
    const places = [this.SUBRULE(this.place)]
    this.MANY(() => {
      this.CONSUME(T.Comma)
      places.push(this.SUBRULE2(this.place))
    })
    const values: Phrase[] = []
    let arrow: Mark | undefined
    this.OPTION(() => {
      arrow = this.CONSUME(T.Assign) as Mark
      values.push(this.SUBRULE(this.phrase))
      this.MANY2(() => {
        this.CONSUME2(T.Comma)
        values.push(this.SUBRULE2(this.phrase))
      })
    })
    this.OPTION2(() => {
      arrow = this.CONSUME(T.Step) as Mark
    })
    return { kind: 'assign', places, ...(arrow && { arrow }), values }
  })

  private readonly place = this.RULE('place', (): Phrase => {
    this.places ??= {
      DEF: [{ ALT: () => this.SUBRULE(this.named) }, { ALT: () => this.SUBRULE(this.indirect) }],
      ERR_MSG: 'an instruction',
    }
    return this.OR<Phrase>(this.places)
  })
}
