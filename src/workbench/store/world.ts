import type { Sweeper } from '../sweeper/sweeper'
import type { CheckedDraft, Draft } from './draft'
import type { Drawer } from './keeping'

/** What the store needs of the page it runs in, so that it runs without one. */
export interface World {
  readonly sweeper: Sweeper
  /** Absent where the browser has none. */
  readonly drawer: Drawer | undefined
  readonly systemIsDark: boolean
  /** Milliseconds of a clock that never runs back. */
  now(): number
  check(draft: Draft): CheckedDraft
  /** Gives the user a text as a file. */
  download(file: string, text: string): void
}
