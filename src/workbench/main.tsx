import { StrictMode } from 'react'
import { createRoot } from 'react-dom/client'
import { downloadText } from './download'
import { checkDraft } from './store/checking'
import { type Drawer, KEPT_KEY } from './store/keeping'
import { isDemo } from './store/kept-state'
import { resolveTheme } from './store/theme'
import { createWorkbench } from './store/workbench'
import { createSweeper } from './sweeper/sweeper'
import './style/palette.css'
import './style/page.css'
import './style/setting.css'
import './style/draft.css'
import './style/grid.css'
import './style/narrow.css'
import { WorkbenchContext } from './use'
import { WorkbenchPage } from './WorkbenchPage'

const dark = matchMedia('(prefers-color-scheme: dark)')

function browserDrawer(): Drawer | undefined {
  try {
    return window.localStorage
  } catch {
    return undefined
  }
}

const workbench = createWorkbench({
  sweeper: createSweeper(
    () => new Worker(new URL('./sweeper/worker.ts', import.meta.url), { type: 'module', name: 'sweeps' }),
  ),
  drawer: browserDrawer(),
  systemIsDark: dark.matches,
  now: () => performance.now(),
  check: checkDraft,
  download: downloadText,
})

dark.addEventListener('change', () => workbench.takeSystemTheme(dark.matches))
// Phones may end a page without any other word than this.
document.addEventListener('visibilitychange', () => {
  if (document.visibilityState === 'hidden') workbench.keepNow()
})
window.addEventListener('pagehide', () => workbench.keepNow())
// Comes from other windows alone.
window.addEventListener('storage', ({ key }) => {
  if (key === KEPT_KEY) workbench.hearOther()
})
workbench.store.subscribe(({ theme, systemIsDark }) => {
  document.documentElement.dataset.theme = resolveTheme(theme, systemIsDark)
})

const place = document.getElementById('workbench')
if (!place) throw new Error('index.html has no place for the workbench.')
createRoot(place).render(
  <StrictMode>
    <WorkbenchContext value={workbench}>
      <WorkbenchPage />
    </WorkbenchContext>
  </StrictMode>,
)

// A draft of the author's own may be a long run: that one waits to be asked for.
if (isDemo(workbench.store.getState())) workbench.sweep()
