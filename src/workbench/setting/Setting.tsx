import { type ReactNode, useLayoutEffect, useRef, useState } from 'react'
import type { SettingText } from '../store/setting-text'
import { useWorkbench, useWorkbenchState } from '../use'
import { ChargesEditor } from './ChargesEditor'
import { EditorFrame } from './EditorFrame'
import { InputEditor } from './InputEditor'
import { MachineEditor } from './MachineEditor'
import { leansOnOff } from './OffUses'
import { ProgressRule } from './ProgressRule'
import { Sentence, type SlotName } from './Sentence'
import { SizesEditor } from './SizesEditor'
import { Status } from './Status'

/** Slots that share an editor: opening one opens them all. */
const TOGETHER: readonly (readonly SlotName[])[] = [['widths', 'sets'], ['charges'], ['sizes'], ['feed', 'trials']]

interface Editing {
  readonly slot: SlotName
  readonly text: SettingText
}

/** The setting: its sentence, the editor of an open slot, the state of the sweep. */
export function SettingSection() {
  const workbench = useWorkbench()
  const { shape, settingText, settingRead, program } = useWorkbenchState(
    ({ shape, settingText, settingRead, checked }) => ({
      shape,
      settingText,
      settingRead,
      program: checked.program,
    }),
  )
  const [editing, setEditing] = useState<Editing>()
  const section = useRef<HTMLElement>(null)
  const [left, setLeft] = useState(0)
  const slot = editing?.slot
  useLayoutEffect(() => {
    if (slot) setLeft(editorPlace(section.current, slot))
  }, [slot])

  const read = editing ? workbench.tryWith(editing.text) : settingRead
  const open = editing ? (TOGETHER.find(slots => slots.includes(editing.slot)) ?? []) : []

  function close() {
    setEditing(undefined)
    if (editing) document.getElementById(`slot-${editing.slot}`)?.focus()
  }

  function take(sweep: boolean) {
    if (!editing) return
    workbench.takeSetting(editing.text)
    close()
    if (sweep) workbench.sweep()
  }

  const parts = editing && {
    shape,
    text: editing.text,
    problems: read.problems,
    setting: read.setting,
    focus: editing.slot,
    onChange: (text: SettingText) => setEditing({ ...editing, text }),
  }
  const frame = (label: string, children: ReactNode, weigh = false) => (
    <EditorFrame
      key={open[0]}
      label={label}
      left={left}
      problems={read.problems}
      weigh={weigh}
      onTake={take}
      onLeave={close}
    >
      {children}
    </EditorFrame>
  )
  return (
    <section id="setting" className="setting" aria-label="Setting" ref={section}>
      <div className="setting-words">
        <Sentence
          shape={shape}
          text={editing?.text ?? settingText}
          parts={read.parts}
          open={open}
          leansOnOff={leansOnOff(program, (editing?.text ?? settingText).sets)}
          onOpen={next => setEditing({ slot: next, text: editing?.text ?? settingText })}
        />
        {parts && open[0] === 'widths' && frame('Machine', <MachineEditor {...parts} />)}
        {parts && open[0] === 'charges' && frame('Charges', <ChargesEditor {...parts} />, true)}
        {parts && open[0] === 'sizes' && frame('Sizes and lets', <SizesEditor {...parts} />)}
        {parts && open[0] === 'feed' && frame('Input', <InputEditor {...parts} />)}
      </div>
      <Status />
      <ProgressRule />
    </section>
  )
}

/** Width of an editor where the page has room. */
const EDITOR = 600

/** Where an editor stands so that it is near its slot and inside the sentence. */
function editorPlace(section: HTMLElement | null, slot: SlotName): number {
  const words = section?.querySelector('.setting-words')
  const place = document.getElementById(`slot-${slot}`)
  if (!words || !place) return 0
  const frame = words.getBoundingClientRect()
  const start = (place.getClientRects()[0] ?? place.getBoundingClientRect()).left - frame.left
  return Math.max(0, Math.min(start, frame.width - EDITOR))
}
