import { createStore, type StoreApi } from 'zustand/vanilla'
import { DEMO_DRAFT, DEMO_SETTING } from './demo'
import { type Drafting, draftingOf } from './drafting'
import { type Keeping, keepingOf, openKept } from './kept-state'
import type { Notice } from './notice'
import { DEFAULT_SCALES, type Reading, type Scales } from './record'
import { readSetting, type SettingRead, type SettingText, shapeAfter } from './setting-text'
import type { WorkbenchState } from './state'
import { type Sweeping, sweepingOf } from './sweeping'
import type { ThemeChoice } from './theme'
import type { World } from './world'

/** The page's state and everything that can be done to it. */
export interface Workbench extends Drafting, Sweeping, Keeping {
  readonly store: StoreApi<WorkbenchState>
  /** What a setting's text would come to for the routine at hand. */
  tryWith(text: SettingText): SettingRead
  /** Takes a setting; where its charges alone differ the finished sweep is weighed again. */
  takeSetting(text: SettingText): void
  read(reading: Reading): void
  /** Puts the cursor on a line of the draft and brings it into view. */
  goToLine(line: number): void
  takeScales(scales: Scales): void
  takeTheme(theme: ThemeChoice): void
  takeSystemTheme(isDark: boolean): void
  notify(notice: Notice): void
  dismiss(key: string): void
}

/** Opens with what the browser kept, or with the demo. Nothing runs until `sweep` is called. */
export function createWorkbench(world: World): Workbench {
  const { kept, notices, theme } = openKept(world)
  const draft = kept?.draft ?? DEMO_DRAFT
  const settingText = kept?.setting ?? DEMO_SETTING
  const checked = world.check(draft)
  const shape = shapeAfter(checked.program, { name: '', sizes: ['n'], lets: [] })
  const store = createStore<WorkbenchState>()(() => ({
    draft,
    checked,
    shape,
    settingText,
    settingRead: readSetting(settingText, shape),
    record: undefined,
    reading: undefined,
    readingPicked: false,
    scales: kept?.scales ?? DEFAULT_SCALES,
    theme,
    systemIsDark: world.systemIsDark,
    aim: undefined,
    notices: [],
  }))

  function notify(notice: Notice): void {
    store.setState(({ notices: shown }) => ({
      notices: [...shown.filter(({ key }) => key !== notice.key), notice],
    }))
  }

  function dismiss(key: string): void {
    store.setState(({ notices: shown }) => ({ notices: shown.filter(notice => notice.key !== key) }))
  }

  const sweeping = sweepingOf(store, world)
  const drafting = draftingOf(store, world, { notify, dismiss })
  const workbench: Workbench = {
    store,
    ...sweeping,
    ...drafting,
    sweep() {
      drafting.checkNow()
      return sweeping.sweep()
    },
    ...keepingOf(store, world, { notify, dismiss }),
    tryWith: text => readSetting(text, store.getState().shape),
    takeSetting(text) {
      const { shape, settingText: before } = store.getState()
      store.setState({ settingText: text, settingRead: readSetting(text, shape) })
      if (text.charges !== before.charges) sweeping.weighAgain()
    },
    read: reading => store.setState({ reading, readingPicked: true }),
    goToLine: line => store.setState({ aim: { line } }),
    takeScales: scales => store.setState({ scales }),
    takeTheme: choice => store.setState({ theme: choice }),
    takeSystemTheme: systemIsDark => store.setState({ systemIsDark }),
    notify,
    dismiss,
  }
  for (const notice of notices(workbench)) notify(notice)
  return workbench
}
