import type { StoreApi } from 'zustand/vanilla'
import { DEMO_DRAFT, DEMO_SETTING } from './demo'
import { type Draft, fileName, isCheckOf } from './draft'
import type { Notice } from './notice'
import { readSetting, type SettingText, shapeAfter } from './setting-text'
import type { WorkbenchState } from './state'
import type { World } from './world'

/** What can be done with the draft. */
export interface Drafting {
  /** As the author types: the check follows a moment later. */
  write(text: string): void
  /** Checks the draft now, where that has not been done. */
  checkNow(): void
  rename(typed: string): void
  pickRoutine(name: string): void
  /** Another draft in place of this one, which a notice gives back. */
  open(file: string, text: string): void
  /** The demo's draft and setting in place of the author's, which a notice gives back. */
  openDemo(): void
  /** The draft is other than the demo's, so that something would have to be given back. */
  differsFromDemo(): boolean
  save(): void
}

interface Board {
  notify(notice: Notice): void
  dismiss(key: string): void
}

/** Milliseconds of rest after which a draft is checked, at least. */
export const REST = 120
/**
 * The same as a multiple of what the last check took. A check runs on the page's own thread: a few milliseconds for the
 * drafts that people write, a tenth of a second for thousands of lines, which then wait for a longer pause.
 */
const PAUSE = 4

export function draftingOf(store: StoreApi<WorkbenchState>, world: World, board: Board): Drafting {
  let due: ReturnType<typeof setTimeout> | undefined
  let took = 0

  function checkNow(): void {
    clearTimeout(due)
    due = undefined
    const { draft, checked: before, shape: shapeBefore, settingText } = store.getState()
    if (isCheckOf(before, draft)) return
    const begun = world.now()
    const checked = world.check(draft)
    took = world.now() - begun
    const shape = shapeAfter(checked.program, shapeBefore)
    store.setState({ checked, shape, settingRead: readSetting(settingText, shape) })
  }

  function replace(draft: Draft, settingText: SettingText): void {
    store.setState({ draft, settingText })
    checkNow()
    const { shape } = store.getState()
    store.setState({ settingRead: readSetting(settingText, shape) })
  }

  /** Replaces the draft, and offers the one before. */
  function exchange(draft: Draft, settingText: SettingText, said: string): void {
    const { draft: before, settingText: settingBefore } = store.getState()
    replace(draft, settingText)
    board.notify({
      key: 'exchanged',
      tone: 'plain',
      text: said,
      actions: [{ label: `Bring back ${before.file}`, act: () => replace(before, settingBefore) }],
    })
  }

  return {
    write(text) {
      const { draft } = store.getState()
      if (draft.text === text) return
      store.setState({ draft: { ...draft, text } })
      clearTimeout(due)
      due = setTimeout(checkNow, Math.max(REST, PAUSE * took))
    },
    checkNow,
    rename: typed => store.setState(({ draft }) => ({ draft: { ...draft, file: fileName(typed) } })),
    pickRoutine(name) {
      store.setState(({ draft }) => ({ draft: { ...draft, routine: name } }))
      checkNow()
    },
    open(file, text) {
      const { settingText } = store.getState()
      exchange({ file: fileName(file), text, routine: undefined }, settingText, `${file} is open.`)
    },
    openDemo() {
      if (this.differsFromDemo()) exchange(DEMO_DRAFT, DEMO_SETTING, 'The demo is back.')
      else replace(DEMO_DRAFT, DEMO_SETTING)
    },
    differsFromDemo() {
      const { draft, settingText } = store.getState()
      return draft.text !== DEMO_DRAFT.text || JSON.stringify(settingText) !== JSON.stringify(DEMO_SETTING)
    },
    save() {
      const { file, text } = store.getState().draft
      world.download(file, text)
    },
  }
}
