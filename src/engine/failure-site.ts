import type { FailureKind } from '../machine'
import type { Operation } from '../routine'

/** A place in the code where a run can end early. */
export interface FailureSite {
  /** `stack-memory`: the stack of frames cannot grow any further. */
  readonly kind: FailureKind | 'stack-memory'
  /** The program's block that it stands in. */
  readonly block: number
  /** The operation that fails; absent where the block's entry or its call does. */
  readonly operation?: Operation
}

/** Numbers failure sites; a module ends with the number of one, plus 1, or with 0 for a good run. */
export class FailureSites {
  readonly list: FailureSite[] = []

  add(site: FailureSite): number {
    return this.list.push(site) - 1
  }
}
