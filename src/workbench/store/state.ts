import { type CheckedDraft, type Draft, isCheckOf } from './draft'
import type { Notice } from './notice'
import type { Reading, Scales, SweepRecord } from './record'
import { type RoutineShape, runsKey, type SettingRead, type SettingText } from './setting-text'
import type { ThemeChoice } from './theme'

/** All that the page shows. A plain value, replaced whole; every part of it is immutable. */
export interface WorkbenchState {
  readonly draft: Draft
  /** The latest check; of an earlier draft while the author types. */
  readonly checked: CheckedDraft
  /** Of the latest draft without errors, so that the setting stays in place while a line is broken. */
  readonly shape: RoutineShape
  readonly settingText: SettingText
  /** `settingText` read for `shape`. */
  readonly settingRead: SettingRead
  readonly record: SweepRecord | undefined
  readonly reading: Reading | undefined
  /** The user picked `reading`: results that come later don't move it. */
  readonly readingPicked: boolean
  readonly scales: Scales
  /** The line that the page was last asked to show; a new object each time. */
  readonly aim: { readonly line: number } | undefined
  readonly theme: ThemeChoice
  readonly systemIsDark: boolean
  readonly notices: readonly Notice[]
}

/** The draft, or the setting apart from its charges, is no longer that of the sweep. */
export function isStale(state: Pick<WorkbenchState, 'draft' | 'checked' | 'settingRead' | 'record'>): boolean {
  const { draft, checked, settingRead, record } = state
  if (!record) return false
  if (record.text !== draft.text) return true
  if (isCheckOf(checked, draft) && checked.program?.routine.name !== record.program.routine.name) return true
  return settingRead.setting === undefined || runsKey(settingRead.setting) !== runsKey(record.setting)
}
