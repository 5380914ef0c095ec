import type { Span } from '../../../grammar/span'
import type { Name } from '../../../grammar/tree'
import { nearestName } from '../names'
import type { Declared } from './declared'
import type { Declaring } from './declaring'
import type { Report } from './report'
import type { VariableScope } from './scope'

/** Names that similar ones are looked for; a text with more of them is no draft of one routine. */
const MOST_SOUGHT = 50

/** How an array that nobody declared is used. */
export type Use = 'load' | 'store' | 'read'

interface MissingArray {
  readonly places: Span[]
  /** The first use in the text decides between `out`, `inout`, `work` and `in`. */
  readonly uses: Use[]
  readonly scope: VariableScope | undefined
}

interface MissingWord {
  readonly name: string
  readonly places: Span[]
  readonly scope: VariableScope | undefined
  /** Whether word code reads it; otherwise declarations alone do. */
  readonly inCode: boolean
  /** Whether it bounds something: in a comparison, an end of a loop, or an exact expression. */
  bounds: boolean
}

/**
 * Gathers names that stand for nothing, so that each is reported once and together with what it follows from: a draft
 * that lacks `in a[n]` lacks both `a` and `n`, and one line makes up for both.
 */
export class Missing {
  private readonly arrays = new Map<string, MissingArray>()
  private readonly words = new Map<string, MissingWord>()
  private readonly nearest = new Map<string, string | undefined>()

  constructor(
    private readonly report: Report,
    private readonly declared: Declared,
    private readonly declaring: Declaring,
    private readonly scopes: readonly VariableScope[],
  ) {}

  array({ text, span }: Name, use: Use, scope: VariableScope | undefined): void {
    if (this.report.mayBeLost(text)) return
    const known = this.arrays.get(text) ?? { places: [], uses: [], scope }
    known.places.push(span)
    known.uses.push(use)
    this.arrays.set(text, known)
  }

  word({ text, span }: Name, scope: VariableScope | undefined, where: 'code' | 'bound' | 'exact'): void {
    if (this.report.mayBeLost(text)) return
    const key = `${scope?.procedure?.name.text ?? ''} ${text}`
    const known = this.words.get(key) ?? { name: text, places: [], scope, inCode: where !== 'exact', bounds: false }
    known.places.push(span)
    known.bounds ||= where !== 'code'
    this.words.set(key, known)
  }

  /** Reports what was gathered. */
  tell(): void {
    const sizes = this.declared.names(meaning => meaning.kind === 'size')
    const size = sizes[0] ?? this.lengthName()
    const roles = new Map([...this.arrays].map(([name, { uses }]) => [name, roleOf(uses)]))
    // Working memory names no size, so one of the arrays has to.
    const isSized = sizes.length > 0 || [...roles.values()].some(role => role !== 'work')
    let declares = false
    for (const [name, missing] of this.arrays) {
      const role = roles.get(name)!
      if (this.tellArray(name, missing, size, role === 'work' && !isSized ? 'out' : role)) declares = true
    }
    for (const missing of this.words.values()) {
      if (this.arrays.has(missing.name)) continue
      if (declares && missing.name === size) continue
      this.tellWord(missing)
    }
  }

  /** The name that the length of a missing array most likely has. */
  private lengthName(): string {
    const unknown = [...this.words.values()]
      .filter(({ name, scope, bounds }) => bounds && !this.arrays.has(name) && !this.nearTo(name, scope))
      .map(({ name }) => name)
    return unknown.includes('n') ? 'n' : (unknown[0] ?? 'n')
  }

  /** Reports an array; true where the remedy is a declaration of its own. */
  private tellArray(name: string, { places, uses, scope }: MissingArray, size: string, role: string): boolean {
    const arrays = this.declared.names(meaning => meaning.kind === 'array')
    const near = this.near(`array ${name}`, () => nearestName(name, [...arrays, ...(scope?.names() ?? [])]))
    const line = `${role} ${name}[${size}]`
    const stored = uses.includes('store')
    if (near) {
      this.report.error({
        span: places[0]!,
        message: `No array \`${name}\` is declared.`,
        remedy: `Write \`${near}\` if that is meant; else declare it before \`begin\`: \`${line}\`.`,
        fix: { label: `Write \`${near}\``, edits: places.map(place => ({ ...ends(place), text: near })) },
      })
      return false
    }
    this.report.error({
      span: places[0]!,
      message: `\`${name}\` is used as an array, and no line declares it: \`${line}\` is missing.`,
      remedy: stored
        ? `Declare it before \`begin\`: \`${line}\`; \`inout\` is for input that is changed, \`out\` for a result, \`work\` for scratch memory.`
        : `Declare it before \`begin\`: \`${line}\`.`,
      fix: this.declaring.insert(line),
    })
    return true
  }

  private tellWord({ name, places, scope, inCode }: MissingWord): void {
    const near = this.nearTo(name, scope)
    const span = places[0]!
    if (near) {
      this.report.error({
        span,
        message: inCode ? `\`${name}\` is neither declared nor ever set.` : `\`${name}\` is not declared.`,
        remedy: `Write \`${near}\` if that is meant${inCode ? `; else set it first, or declare \`in ${name}\`` : ''}.`,
        fix: { label: `Write \`${near}\``, edits: places.map(place => ({ ...ends(place), text: near })) },
      })
      return
    }
    const owner = this.scopes.find(each => each !== scope && each.has(name))
    if (inCode && owner && scope) {
      this.report.error({ span, ...strangerIn(name, scope, owner) })
      return
    }
    const line = inCode ? `in ${name}` : `let ${name} = 8`
    this.report.error({
      span,
      message: inCode ? `\`${name}\` is neither declared nor ever set.` : `\`${name}\` is not declared.`,
      remedy: inCode
        ? scope?.procedure
          ? `Set it first, or make it a parameter of \`${scope.procedure.name.text}\`.`
          : `Set it first, \`${name} <- 0\`, or declare it before \`begin\` where it comes from outside: \`in ${name}\`.`
        : `A size gets its name from the length of an input, \`in a[${name}]\`; a number to tune is declared with \`${line}\`.`,
      ...(inCode && !scope?.procedure && { fix: this.declaring.insert(line) }),
    })
  }

  private nearTo(name: string, scope: VariableScope | undefined): string | undefined {
    return this.near(`word ${scope?.procedure?.name.text ?? ''} ${name}`, () => {
      // A scope has its scalars among its own names.
      const words = this.declared.names(({ kind }) => !['array', 'procedure', scope ? 'scalar' : ''].includes(kind))
      return nearestName(name, [...(scope?.names() ?? []), ...words])
    })
  }

  private near(key: string, seek: () => string | undefined): string | undefined {
    if (!this.nearest.has(key) && this.nearest.size < MOST_SOUGHT) this.nearest.set(key, seek())
    return this.nearest.get(key)
  }
}

function ends({ start, end }: Span): { start: number; end: number } {
  return { start, end }
}

/** `in` where it is only read, `work` where it is filled first, `inout` where it is read first and then changed. */
function roleOf(uses: readonly Use[]): 'in' | 'out' | 'inout' | 'work' {
  if (!uses.includes('store')) return 'in'
  if (!uses.includes('load')) return 'out'
  return uses.find(use => use !== 'read') === 'store' ? 'work' : 'inout'
}

function strangerIn(name: string, scope: VariableScope, owner: VariableScope) {
  const where = owner.procedure ? `procedure \`${owner.procedure.name.text}\`` : "the routine's own body"
  const message = `\`${name}\` is a variable of ${where}, which is not seen here.`
  const remedy = scope.procedure
    ? `Make it a parameter of \`${scope.procedure.name.text}\`, and give it in each call.`
    : `Let \`${owner.procedure!.name.text}\` return it, and take it from the call.`
  return { message, remedy }
}
