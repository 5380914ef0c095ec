import type { ReactNode } from 'react'
import type { Setting } from '../../sweep/setting'
import type { RoutineShape, SettingField, SettingProblem, SettingText } from '../store/setting-text'
import { sentenceOf } from '../store/standing'
import type { SlotName } from './Sentence'

/** What every editor of the setting takes. */
export interface EditorProps {
  readonly shape: RoutineShape
  readonly text: SettingText
  readonly problems: readonly SettingProblem[]
  readonly setting: Setting | undefined
  /** The slot it was opened from, whose field comes first to hand. */
  readonly focus: SlotName
  readonly onChange: (text: SettingText) => void
}

/** A row of an editor: what it is about, and its fields. */
export function Row({ label, children }: { readonly label: ReactNode; readonly children: ReactNode }) {
  return (
    <fieldset className="row">
      <legend>{label}</legend>
      <div className="row-fields">{children}</div>
    </fieldset>
  )
}

function problemId(field: SettingField): string {
  return `problem-${field.replaceAll(' ', '-')}`
}

/** What an input needs so that its problem is read with it. */
export function marking(problems: readonly SettingProblem[], field: SettingField) {
  return problems.some(problem => problem.field === field)
    ? { 'aria-invalid': true, 'aria-describedby': problemId(field) }
    : {}
}

/** What is wrong with a field, and what to write instead. */
export function Problem(props: { readonly problems: readonly SettingProblem[]; readonly field: SettingField }) {
  const found = props.problems.find(problem => problem.field === props.field)
  return (
    <p className="problem" id={problemId(props.field)} aria-live="polite">
      {found && (
        <>
          <b>{sentenceOf(found.problem)}</b> {sentenceOf(found.remedy)}
        </>
      )}
    </p>
  )
}
