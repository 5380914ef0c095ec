import { printBounds, printCondition, printExact, printWord, printWordCondition } from './expressions'
import type { Comment, Declaration, ProcedureTree, RoutineTree, Statement } from './tree'

/** Targets up to this long stand in a column with their arrows one below another; longer ones would tear it apart. */
const COLUMN = 2
/** Tables break before it. */
const WIDEST = 100

/**
 * A routine in canonical layout: declarations two blanks in, their words in a column; instructions two blanks in for
 * each form around them; labels at the left edge; ASCII signs; as few brackets as the tree allows. Comments and
 * single blank lines stay where they were. Ends without a line break.
 */
export function printRoutine(tree: RoutineTree): string {
  return new Printer(tree).print()
}

type Margin = { readonly line: number; readonly comment?: Comment }

class Printer {
  private readonly lines: string[] = []
  /** Comments and blank lines, in order of source line; those before `margin` are set. */
  private readonly margins: readonly Margin[]
  private margin = 0
  /** Place of the last line printed that came from the source, where a comment beside it goes. */
  private last = -1
  /** Place of the last line that opens something, below which no blank line goes. */
  private opened = -1

  constructor(private readonly tree: RoutineTree) {
    const comments = tree.comments.map(comment => ({ line: comment.line, comment }))
    const blanks = tree.blanks.map(line => ({ line }))
    this.margins = [...comments, ...blanks].sort((a, b) => a.line - b.line)
  }

  print(): string {
    const { tree } = this
    this.open(tree.span.line, 0, `routine ${tree.name.text}`, 0)
    this.declarations()
    this.open(tree.begin.line, 0, 'begin', 2)
    this.statements(tree.body, 2)
    this.close(tree.end.line, 0, 'end')
    this.catchUp(Number.POSITIVE_INFINITY, 0)
    while (this.lines[this.lines.length - 1] === '') this.lines.pop()
    return this.lines.join('\n')
  }

  // Lines and what stands between them

  /** Prints what stood on source line `line`; comments that stood above it stand `above` blanks in. */
  private set(line: number, depth: number, text: string, above = depth): void {
    this.catchUp(line, above)
    this.last = this.lines.length
    this.lines.push(' '.repeat(depth) + text)
  }

  private open(line: number, depth: number, text: string, above = depth): void {
    this.set(line, depth, text, above)
    this.opened = this.last
  }

  private close(line: number, depth: number, text: string): void {
    this.catchUp(line, depth + 2)
    if (this.lines[this.lines.length - 1] === '') this.lines.pop()
    this.set(line, depth, text)
  }

  /** Sets the comments and blank lines that stood before source line `line`. */
  private catchUp(line: number, depth: number): void {
    for (; this.margin < this.margins.length; this.margin++) {
      const { line: place, comment } = this.margins[this.margin]!
      if (place >= line) return
      if (!comment) this.setBlank()
      else if (comment.own || this.last < 0) this.lines.push(' '.repeat(depth) + printComment(comment))
      else this.lines[this.last] += `  ${printComment(comment)}`
    }
  }

  /** One blank line for any number of them; none at the top, none right below an opening line. */
  private setBlank(): void {
    const at = this.lines.length - 1
    if (at >= 0 && this.lines[at] !== '' && at !== this.opened) this.lines.push('')
  }

  // Declarations

  private declarations(): void {
    const { declarations } = this.tree
    const words = declarations.map(declarationWord)
    const width = Math.max(0, ...words.map(word => word.length))
    const measures = declarations.map(one => (one.kind === 'claim' ? one.measure.length : 0))
    const measure = Math.max(0, ...measures)
    for (const [at, declaration] of declarations.entries()) {
      if (declaration.kind === 'procedure') this.procedure(declaration, 2)
      else {
        const word = words[at]!.padEnd(width)
        for (const text of wrap(`${word} ${printDeclaration(declaration, measure)}`))
          this.set(declaration.span.line, 2, text)
      }
    }
  }

  private procedure(tree: ProcedureTree, depth: number): void {
    const parameters = tree.parameters.map(({ text }) => text).join(', ')
    const results = tree.results.map(({ text }) => text).join(', ')
    const head = `procedure ${tree.name.text}(${parameters})`
    this.open(tree.span.line, depth, results ? `${head} -> ${results}` : head)
    this.statements(tree.body, depth + 2)
    this.close(tree.end.line, depth, 'end')
  }

  // Instructions

  private statements(statements: readonly Statement[], depth: number): void {
    const column = targetColumn(statements)
    for (const statement of statements) this.statement(statement, depth, column)
  }

  private statement(statement: Statement, depth: number, column: number): void {
    const { line } = statement.span
    switch (statement.kind) {
      case 'label':
        this.set(line, 0, `${statement.name.text}:`)
        break
      case 'while':
        this.open(line, depth, `while ${printWordCondition(statement.condition)}`)
        this.statements(statement.body, depth + 2)
        this.close(statement.end.line, depth, 'end')
        break
      case 'repeat':
        this.open(line, depth, 'repeat')
        this.statements(statement.body, depth + 2)
        this.close(statement.end.line, depth, `until ${printWordCondition(statement.until)}`)
        break
      case 'for':
        this.open(line, depth, printFor(statement))
        this.statements(statement.body, depth + 2)
        this.close(statement.end.line, depth, 'end')
        break
      case 'if':
        this.if(statement, depth)
        break
      case 'procedure':
        this.procedure(statement, depth)
        break
      default:
        this.set(line, depth, printInstruction(statement, column))
    }
  }

  private if(statement: Statement & { kind: 'if' }, depth: number): void {
    for (const [at, branch] of statement.branches.entries()) {
      const text = `if ${printWordCondition(branch.condition)}`
      if (at === 0) this.open(branch.span.line, depth, text)
      else this.turn(branch.span.line, depth, `else ${text}`)
      this.statements(branch.body, depth + 2)
    }
    if (statement.otherwise) {
      this.turn(statement.otherwise.span.line, depth, 'else')
      this.statements(statement.otherwise.body, depth + 2)
    }
    this.close(statement.end.line, depth, 'end')
  }

  /** A line that closes one branch and opens the next. */
  private turn(line: number, depth: number, text: string): void {
    this.close(line, depth, text)
    this.opened = this.last
  }
}

function printComment({ text }: Comment): string {
  return text === '' || text.startsWith('#') ? `#${text}` : `# ${text}`
}

function declarationWord(declaration: Declaration | ProcedureTree): string {
  switch (declaration.kind) {
    case 'table':
    case 'formula':
      return 'fix'
    case 'feed-range':
    case 'feed-distinct':
      return 'feed'
    case 'procedure':
      return ''
    default:
      return declaration.kind
  }
}

/** A declaration without its word. `measure` is the width of the column of `time` and `space`. */
function printDeclaration(declaration: Declaration, measure: number): string {
  switch (declaration.kind) {
    case 'in':
    case 'out':
    case 'inout':
    case 'work':
      return declaration.items
        .map(({ name, length }) => (length ? `${name.text}[${printExact(length)}]` : name.text))
        .join(', ')
    case 'let':
    case 'fix':
      return `${declaration.name.text} = ${printExact(declaration.value)}`
    case 'table': {
      const values = declaration.values.map(printExact).join(', ')
      return `${declaration.name.text}[${printExact(declaration.length)}] = ${values}`
    }
    case 'formula': {
      const range = `${declaration.index.text} in ${printBounds(declaration.from, declaration.to)}`
      return `${declaration.name.text}[${range}] = ${printExact(declaration.value)}`
    }
    case 'need':
    case 'check':
      return printCondition(declaration.condition)
    case 'feed-range': {
      const index = declaration.index ? `[${declaration.index.text}]` : ''
      return `${declaration.name.text}${index} in ${printBounds(declaration.from, declaration.to)}`
    }
    case 'feed-distinct':
      return `${declaration.name.text} distinct`
    case 'claim':
      return `${declaration.measure.padEnd(measure)} ${declaration.operator} ${printExact(declaration.bound)}`
  }
}

/** Where a declaration may break: after what joins the parts of a list or a condition, and leads into the next line. */
const BREAKS = /(?<=, | and | or | : )/

/** Breaks a long declaration outside of brackets; the notation lets a line that ends so go on. */
function wrap(text: string): string[] {
  if (text.length <= WIDEST) return [text]
  const lines: string[] = []
  let line = ''
  let open = 0
  let part = ''
  for (const piece of text.split(BREAKS)) {
    part += piece
    for (const sign of piece) open += sign === '(' || sign === '[' ? 1 : sign === ')' || sign === ']' ? -1 : 0
    if (open > 0) continue
    // `name :` at the head of a line would be a label.
    const label = /^[^ ]+ : /.test(part)
    if (line !== '' && !label && line.length + part.length > WIDEST) {
      lines.push(line.trimEnd())
      line = '    '
    }
    line += part
    part = ''
  }
  return [...lines, line.trimEnd()]
}

/** The width of the column of targets in one list of instructions: that of the longest short name. */
function targetColumn(statements: readonly Statement[]): number {
  let width = 0
  for (const statement of statements) {
    if (statement.kind !== 'assign' || statement.target.kind !== 'name') continue
    const { length } = statement.target.name.text
    if (length <= COLUMN && length > width) width = length
  }
  return width
}

function printFor(statement: Statement & { kind: 'for' }): string {
  const { variable, from, to, step, down } = statement
  const range = `${printWord(from)} ${down ? 'downto' : 'to'} ${printWord(to)}`
  return `for ${variable.text} from ${range}${step ? ` by ${printWord(step)}` : ''}`
}

type Instruction = Exclude<Statement, { kind: 'label' | 'while' | 'repeat' | 'for' | 'if' | 'procedure' }>

function printInstruction(statement: Instruction, column: number): string {
  switch (statement.kind) {
    case 'assign': {
      const target = printWord(statement.target)
      const place = statement.target.kind === 'name' ? target.padEnd(column) : target
      return `${place} <- ${printWord(statement.value)}`
    }
    case 'product': {
      const { high, low, left, right, span } = statement
      const product = printWord({ kind: 'binary', operator: '*', left, right, span })
      return `${printWord(high)}, ${printWord(low)} <- ${product}`
    }
    case 'call': {
      const call = `${statement.procedure.text}(${statement.arguments.map(printWord).join(', ')})`
      const results = statement.results.map(printWord).join(', ')
      return results ? `${results} <- ${call}` : call
    }
    case 'goto':
      return `goto ${statement.label.text}`
    case 'if-goto':
      return `if ${printWordCondition(statement.condition)} goto ${statement.label.text}`
    case 'halt':
      return 'halt'
    case 'return':
      return statement.values ? `return ${statement.values.map(printWord).join(', ')}` : 'return'
    case 'assert':
      return `assert ${printCondition(statement.condition)}`
  }
}
