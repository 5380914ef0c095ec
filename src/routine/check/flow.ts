import type { Statement } from '../../../grammar/tree'
import type { JumpCheck } from './jumps'
import type { Report } from './report'

/** Warns of instructions that no run comes to: one warning for each stretch. */
export class FlowCheck {
  constructor(
    private readonly report: Report,
    private readonly jumps: JumpCheck,
  ) {}

  /** Follows a body from its top. Answers whether a run may come to its end. */
  follow(body: readonly Statement[], entered: boolean): boolean {
    let reached = entered
    let before: Statement | undefined
    let told = !entered
    for (const statement of body) {
      if (statement.kind === 'procedure') continue
      if (statement.kind === 'label') {
        reached ||= this.jumps.isUsed(statement.name.text)
        told &&= !reached
        continue
      }
      if (!reached && !told) {
        told = true
        this.tell(statement, before)
      }
      reached = this.leave(statement, reached)
      before = statement
    }
    return reached
  }

  /** Whether a run that comes to a statement may come past it. */
  private leave(statement: Statement, reached: boolean): boolean {
    switch (statement.kind) {
      case 'goto':
      case 'halt':
      case 'return':
        return false
      case 'while':
      case 'for':
        this.follow(statement.body, reached)
        return reached
      case 'repeat':
        return this.follow(statement.body, reached)
      case 'if': {
        const ends = statement.branches.map(branch => this.follow(branch.body, reached))
        const otherwise = statement.otherwise ? this.follow(statement.otherwise.body, reached) : reached
        return otherwise || ends.some(end => end)
      }
      default:
        return reached
    }
  }

  private tell(statement: Statement, before: Statement | undefined): void {
    const why = before ? `: line ${before.span.line} never comes past itself` : ''
    this.report.warn({
      span: statement.span,
      message: `No run comes to this instruction${why}.`,
      remedy: 'Delete it, or put a label before it that something jumps to.',
    })
  }
}
