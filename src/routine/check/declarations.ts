import type { Declaration, DeclaredItem, Exact, Name, ProcedureTree, RoutineTree } from '../../../grammar/tree'
import { namesInExact } from '../exact-names'
import type {
  ArrayDeclaration,
  ArrayRole,
  FeedDeclaration,
  FixDeclaration,
  LetDeclaration,
  Routine,
  ScalarDeclaration,
} from '../routine'
import { type Declared, locateMeaning, type Meaning } from './declared'
import type { Declaring } from './declaring'
import type { ExactCheck, ExactPlace } from './exact'
import type { Report } from './report'
import { proceduresOf, type VariableScope } from './scope'
import { eachStatement, partsOfWord, targetsOf, wordsOf } from './walk'

type Declarations = Omit<Routine, 'name' | 'tree' | 'text'>
type Listed = 'in' | 'out' | 'inout' | 'work'

/** Read-only arrays first, so that one compare tells an address that may be stored to. */
const MEMORY_ORDER: readonly (readonly ArrayRole[])[] = [['in'], ['table'], ['inout', 'out', 'work']]

/**
 * Gathers what a routine declares. Names come first, all of them, so that a line may use what a later one declares; then
 * the sizes, which are the free names in lengths of inputs and results; then what the expressions use.
 */
export class DeclarationCheck {
  private readonly arrays: ArrayDeclaration[] = []
  private readonly scalars: ScalarDeclaration[] = []
  private readonly lets: LetDeclaration[] = []
  private readonly fixes: FixDeclaration[] = []
  private readonly feeds = new Map<string, FeedDeclaration>()
  private readonly sizes: string[] = []
  private readonly items = new Map<string, DeclaredItem>()

  constructor(
    private readonly tree: RoutineTree,
    private readonly report: Report,
    private readonly declared: Declared,
    private readonly declaring: Declaring,
    private readonly scopes: readonly VariableScope[],
  ) {}

  /** Enters every declared name, and the sizes. */
  enterNames(): void {
    for (const declaration of this.tree.declarations) this.enterDeclaration(declaration)
    for (const statement of this.tree.body) if (statement.kind === 'procedure') this.enterProcedure(statement)
    for (const { length, role } of this.arrays) {
      if (role === 'in' || role === 'out' || role === 'inout') this.enterSizes(length)
    }
  }

  /** Checks the expressions of all declarations, and gives what they declare. */
  checkExpressions(exact: ExactCheck): Declarations {
    const lets = new Set<string>()
    const fixes = new Set(this.lets.map(({ name }) => name))
    const at = (what: string): ExactPlace => ({ kind: 'point', what })
    const lengthOf = ({ text }: Name): ExactPlace => ({
      kind: 'point',
      what: `the length of \`${text}\``,
      cause: 'length',
    })
    for (const declaration of this.tree.declarations) {
      switch (declaration.kind) {
        case 'in':
        case 'out':
        case 'inout':
        case 'work':
          for (const { name, length } of declaration.items) if (length) exact.expression(length, lengthOf(name))
          break
        case 'let':
        case 'fix': {
          const known = declaration.kind === 'let' ? lets : fixes
          const name = declaration.name.text
          exact.expression(declaration.value, { kind: declaration.kind, name, known })
          known.add(name)
          break
        }
        case 'table':
          exact.expression(declaration.length, lengthOf(declaration.name))
          for (const value of declaration.values) exact.expression(value, at('a table'))
          this.checkTableLength(declaration)
          break
        case 'formula':
          exact.expression(declaration.from, at('a table'))
          exact.expression(declaration.to, at('a table'))
          exact.index(declaration.index)
          exact.expression(declaration.value, at('a table'), [declaration.index.text])
          break
        case 'need':
          exact.condition(declaration.condition, at('a need'))
          break
        case 'claim':
          exact.expression(declaration.bound, at('a claim'))
          break
        case 'check':
          exact.condition(declaration.condition, { kind: 'check' })
          break
        case 'feed-range':
        case 'feed-distinct':
          this.feed(declaration, exact)
          break
        case 'procedure':
          break
      }
    }
    return this.declarations()
  }

  private declarations(): Declarations {
    const of = <K extends Declaration['kind']>(kind: K) =>
      this.tree.declarations.filter((each): each is Extract<Declaration, { kind: K }> => each.kind === kind)
    const arrays = MEMORY_ORDER.flatMap(roles => this.arrays.filter(({ role }) => roles.includes(role)))
    return {
      sizes: this.sizes,
      arrays,
      scalars: this.scalars,
      lets: this.lets,
      fixes: this.fixes,
      needs: of('need').map(({ condition, span }) => ({ condition, span })),
      feeds: [...this.feeds.values()],
      claims: of('claim').map(({ measure, operator, bound, span }) => ({ measure, operator, bound, span })),
      checks: of('check').map(({ condition, span }) => ({ condition, span })),
      procedures: proceduresOf(this.tree),
    }
  }

  private enterDeclaration(declaration: Declaration | ProcedureTree): void {
    switch (declaration.kind) {
      case 'in':
      case 'out':
      case 'inout':
      case 'work':
        for (const item of declaration.items) this.enterItem(declaration.kind, item)
        break
      case 'let':
        if (this.enter(declaration.name, { kind: 'let', span: declaration.span }))
          this.lets.push(plain(declaration))
        break
      case 'fix':
        if (this.enter(declaration.name, { kind: 'fix', span: declaration.span }))
          this.fixes.push(plain(declaration))
        break
      case 'table': {
        const { name, length, values, span } = declaration
        if (this.enter(name, { kind: 'array', role: 'table', span }))
          this.arrays.push({ name: name.text, role: 'table', length, table: { kind: 'list', values }, span })
        break
      }
      case 'formula': {
        const { name, index, from, to, value, span } = declaration
        if (!this.enter(name, { kind: 'array', role: 'table', span })) break
        const length = lengthBetween(from, to)
        this.arrays.push({
          name: name.text,
          role: 'table',
          length,
          table: { kind: 'formula', index, from, to, value },
          span,
        })
        break
      }
      case 'procedure':
        this.enterProcedure(declaration)
        break
      default:
        break
    }
  }

  private enterItem(role: Listed, item: DeclaredItem): void {
    const { name, length, span } = item
    if (role === 'work' && !length) {
      this.refuseScalarWork(item)
      return
    }
    if (role !== 'work' && !length) {
      if (!this.enter(name, { kind: 'scalar', role, span: name.span })) return
      this.scalars.push({ name: name.text, role, span })
      this.items.set(name.text, item)
      return
    }
    if (length && this.enter(name, { kind: 'array', role, span: name.span }))
      this.arrays.push({ name: name.text, role, length, span })
  }

  private refuseScalarWork(item: DeclaredItem): void {
    const { text, span } = item.name
    if (!this.isIndexed(text)) {
      this.report.error({
        span,
        message: `\`work ${text}\` declares a single word.`,
        remedy: `Delete it: variables need no declaration. Working memory has a length: \`work ${text}[16]\`.`,
        fix: this.declaring.remove(item),
      })
      return
    }
    const [size = '16'] = this.lengthNames()
    this.report.error({
      span,
      message: `The work array \`${text}\` has no length.`,
      remedy: `Write how many words it has: \`work ${text}[${size}]\`.`,
      fix: this.declaring.lengthen(text, size),
    })
    this.enter(item.name, { kind: 'array', role: 'work', span })
  }

  /** Names that lengths of other arrays consist of. */
  private lengthNames(): string[] {
    return this.tree.declarations.flatMap(each =>
      'items' in each
        ? each.items.flatMap(({ length }) => (length?.kind === 'name' ? [length.name.text] : []))
        : [],
    )
  }

  /** Whether some code has `name[...]` where `name` is never set. */
  private isIndexed(name: string): boolean {
    return this.scopes.some(scope => {
      if (scope.has(name)) return false
      for (const statement of eachStatement(scope.body)) {
        const waiting = [...targetsOf(statement), ...wordsOf(statement)]
        for (let word = waiting.pop(); word; word = waiting.pop()) {
          if (word.kind === 'element' && word.base.text === name) return true
          waiting.push(...partsOfWord(word))
        }
      }
      return false
    })
  }

  private enterProcedure(tree: ProcedureTree): void {
    this.enter(tree.name, { kind: 'procedure', tree, span: tree.name.span })
  }

  /** Enters a name; false, and an error, where it is taken. */
  private enter({ text, span }: Name, meaning: Meaning): boolean {
    const known = this.declared.get(text)
    if (!known) {
      this.declared.set(text, meaning)
      return true
    }
    const width = known.kind === 'width'
    this.report.error({
      span,
      message: width
        ? '`w` is the word width, and nothing else.'
        : `\`${text}\` is ${locateMeaning(known)} already.`,
      remedy: width ? 'Choose another name.' : 'Choose another name, or delete one of the two.',
      ...(known.kind !== 'width' && { path: [{ span: known.span, note: 'declared here first' }] }),
      cause: `twice ${text} ${span.start}`,
    })
    return false
  }

  private enterSizes(length: Exact): void {
    for (const name of namesInExact(length)) {
      const meaning = this.declared.get(name)
      if (meaning?.kind === 'scalar' && meaning.role === 'in') this.refuseScalarSize(name, length)
      else if (meaning) continue
      this.declared.set(name, { kind: 'size', span: length.span })
      this.sizes.push(name)
    }
  }

  /** `in n` beside `in a[n]`. */
  private refuseScalarSize(name: string, length: Exact): void {
    const item = this.items.get(name)!
    this.report.error({
      span: item.span,
      message: `\`${name}\` is declared as an input, and it is a size as well: a length uses it on line ${length.span.line}.`,
      remedy: `Delete it here: a size is a word of input without a declaration of its own.`,
      fix: this.declaring.remove(item),
    })
    this.scalars.splice(
      this.scalars.findIndex(scalar => scalar.name === name),
      1,
    )
  }

  private checkTableLength({ name, length, values }: Extract<Declaration, { kind: 'table' }>): void {
    if (length.kind !== 'number' || length.denominator !== 1n || length.numerator === BigInt(values.length)) return
    this.report.error({
      span: length.span,
      message: `\`${name.text}\` has ${length.numerator} words, and its list gives ${values.length}.`,
      remedy: `Write \`${name.text}[${values.length}]\`, or mend the list.`,
      fix: {
        label: `Write \`${name.text}[${values.length}]\``,
        edits: [{ start: length.span.start, end: length.span.end, text: String(values.length) }],
      },
    })
  }

  private feed(
    declaration: Extract<Declaration, { kind: 'feed-range' | 'feed-distinct' }>,
    exact: ExactCheck,
  ): void {
    const { name, span } = declaration
    const distinct = declaration.kind === 'feed-distinct'
    const place: ExactPlace = { kind: 'point', what: 'a feed' }
    if (declaration.kind === 'feed-range') {
      const { index, from, to } = declaration
      if (index) exact.index(index)
      const bound = index ? [index.text] : []
      exact.expression(from, place, bound)
      exact.expression(to, place, bound)
    }
    const meaning = this.declared.get(name.text)
    const isArray = meaning?.kind === 'array'
    const takes = (isArray || meaning?.kind === 'scalar') && (meaning.role === 'in' || meaning.role === 'inout')
    if (!takes) {
      if (meaning === undefined && this.report.mayBeLost(name.text)) return
      this.report.error({
        span: name.span,
        message: `\`${name.text}\` is ${meaning ? locateMeaning(meaning) : 'not declared'}, and a feed is for an input.`,
        remedy: `Name an array or a word that is declared with \`in\` or \`inout\`.`,
        cause: `feed ${name.text}`,
      })
      return
    }
    if (!isArray && (distinct || declaration.index)) {
      this.report.error({
        span: name.span,
        message: `\`${name.text}\` is a single word.`,
        remedy: distinct
          ? 'Delete the line: one word repeats nothing.'
          : `Leave the index out: \`feed ${name.text} in F .. T\`.`,
        cause: `feed form ${name.text} ${span.start}`,
      })
      return
    }
    const known = this.feeds.get(name.text)
    if (known && (distinct ? known.distinct : known.range)) {
      this.report.error({
        span,
        message: distinct
          ? `\`${name.text}\` is declared distinct already.`
          : `\`${name.text}\` has a range already (line ${known.span.line}).`,
        remedy: 'Keep one of the two lines.',
        path: [{ span: known.span, note: 'declared here first' }],
      })
      return
    }
    const range =
      declaration.kind === 'feed-range'
        ? {
            from: declaration.from,
            to: declaration.to,
            ...(declaration.index && { index: declaration.index }),
          }
        : known?.range
    this.feeds.set(name.text, {
      name: name.text,
      distinct: distinct || (known?.distinct ?? false),
      ...(range && { range }),
      span: known?.span ?? span,
    })
  }
}

function plain({ name, value, span }: { name: Name; value: Exact; span: LetDeclaration['span'] }): LetDeclaration {
  return { name: name.text, value, span }
}

/** T - F + 1. */
function lengthBetween(from: Exact, to: Exact): Exact {
  const { span } = to
  const one: Exact = { kind: 'number', numerator: 1n, denominator: 1n, span }
  const difference: Exact = { kind: 'binary', operator: '-', left: to, right: from, span }
  return { kind: 'binary', operator: '+', left: difference, right: one, span }
}
