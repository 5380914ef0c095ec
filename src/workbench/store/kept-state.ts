import type { StoreApi } from 'zustand/vanilla'
import { DEMO_DRAFT, DEMO_SETTING } from './demo'
import { damagedTexts, discardDamaged, findKept, findTheme, type Kept, keep, keepTheme } from './keeping'
import type { Notice } from './notice'
import type { WorkbenchState } from './state'
import type { ThemeChoice } from './theme'
import type { World } from './world'

/** What survives a reload. */
export interface Keeping {
  /** Writes down what has changed, now rather than a moment later: the page is about to go. */
  keepNow(): void
  /** Another window of this browser has kept its draft over this one's. */
  hearOther(): void
}

interface Board {
  notify(notice: Notice): void
  dismiss(key: string): void
}

/** Milliseconds of rest after which a change is written down. */
const REST = 300

const NOT_KEPT: Notice = {
  key: 'not kept',
  tone: 'trouble',
  text: 'This browser keeps nothing for the page: the draft would be gone after a reload. Save it as a file.',
  actions: [],
}

const OTHER: Notice = {
  key: 'other window',
  tone: 'plain',
  text: 'Another window of this browser has the page open too. A reload brings the draft that was changed last; save this one as a file to be sure of it.',
  actions: [],
}

export interface Opened {
  readonly kept: Kept | undefined
  readonly theme: ThemeChoice
  /** What there is to say about it, once the page can. */
  notices(board: Board): readonly Notice[]
}

/** Looks for what an earlier visit left. */
export function openKept(world: World): Opened {
  const { drawer } = world
  if (!drawer) return { kept: undefined, theme: 'system', notices: () => [NOT_KEPT] }
  const found = findKept(drawer)
  const aside = damagedTexts(drawer)
  const texts = found.kind === 'damaged' && !aside.includes(found.text) ? [...aside, found.text] : aside
  const why = found.kind === 'damaged' ? found.reason : 'it could not be read'
  return {
    kept: found.kind === 'kept' ? found.kept : undefined,
    theme: findTheme(drawer),
    notices(board) {
      if (found.kind === 'closed') return [NOT_KEPT]
      return texts.length > 0 ? [damagedNotice(world, board, texts, why)] : []
    },
  }
}

function damagedNotice(world: World, board: Board, texts: readonly string[], why: string): Notice {
  return {
    key: 'damaged',
    tone: 'trouble',
    text: `What an earlier visit left here is damaged (${why}). The page opened without it and keeps it as it is.`,
    actions: [
      {
        label: 'Download what was left',
        stays: true,
        act: () => world.download('tallyword-left.json', texts.join('\n')),
      },
      {
        label: 'Discard it',
        act() {
          if (world.drawer) discardDamaged(world.drawer)
          board.dismiss('damaged')
        },
      },
    ],
  }
}

/** Keeps draft, setting, scales and theme as they change. */
export function keepingOf(store: StoreApi<WorkbenchState>, world: World, board: Board): Keeping {
  const { drawer } = world
  let due: ReturnType<typeof setTimeout> | undefined

  function keepNow(): void {
    if (due === undefined || !drawer) return
    clearTimeout(due)
    due = undefined
    const { draft, settingText, scales } = store.getState()
    if (keep(drawer, { draft, setting: settingText, scales })) board.dismiss(NOT_KEPT.key)
    else board.notify(NOT_KEPT)
  }

  store.subscribe((state, before) => {
    if (drawer && state.theme !== before.theme) keepTheme(drawer, state.theme)
    const same =
      state.draft === before.draft && state.settingText === before.settingText && state.scales === before.scales
    if (same) return
    clearTimeout(due)
    due = setTimeout(keepNow, REST)
  })
  return { keepNow, hearOther: () => board.notify(OTHER) }
}

/** The draft and setting are still the demo's, so that a first visit may run it unasked. */
export function isDemo({ draft, settingText }: Pick<WorkbenchState, 'draft' | 'settingText'>): boolean {
  return draft.text === DEMO_DRAFT.text && JSON.stringify(settingText) === JSON.stringify(DEMO_SETTING)
}
