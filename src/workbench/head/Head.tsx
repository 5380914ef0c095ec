import { useRef, useState } from 'react'
import { THEME_CHOICES, type ThemeChoice } from '../store/theme'
import { useWorkbench, useWorkbenchState } from '../use'
import { openPicked } from './open-file'
import { TallyMark } from './TallyMark'

const THEME_WORDS: Readonly<Record<ThemeChoice, string>> = { system: 'Auto', light: 'Light', dark: 'Dark' }

/** The running head: name, file, and what can be done with the draft as a whole. */
export function Head() {
  const workbench = useWorkbench()
  const theme = useWorkbenchState(state => state.theme)
  const picker = useRef<HTMLInputElement>(null)
  return (
    <header className="head">
      <a className="name" href="#setting" aria-label="Tallyword, to the setting">
        <TallyMark />
        <span>Tallyword</span>
      </a>
      <FileName />
      <nav className="acts" aria-label="Draft and page">
        <button type="button" onClick={() => picker.current?.click()}>
          Open
        </button>
        <input
          ref={picker}
          type="file"
          accept=".tally,.txt,text/plain"
          hidden
          onChange={async event => {
            const { files } = event.currentTarget
            const [file] = files ?? []
            event.currentTarget.value = ''
            if (file) await openPicked(workbench, file)
          }}
        />
        <button type="button" onClick={() => workbench.save()}>
          Save
        </button>
        <DemoButton />
        <select
          className="theme"
          aria-label="Light or dark"
          value={theme}
          onChange={event => workbench.takeTheme(event.currentTarget.value as ThemeChoice)}
        >
          {THEME_CHOICES.map(choice => (
            <option key={choice} value={choice}>
              {THEME_WORDS[choice]}
            </option>
          ))}
        </select>
      </nav>
    </header>
  )
}

/** The draft's file name, a field that is as wide as what stands in it. */
function FileName() {
  const workbench = useWorkbench()
  const file = useWorkbenchState(state => state.draft.file)
  const [typed, setTyped] = useState<string>()
  const shown = typed ?? file
  return (
    <label className="file">
      <span className="sr">File name of the draft</span>
      <span className="file-sizer" data-text={shown}>
        <input
          value={shown}
          size={1}
          spellCheck={false}
          autoComplete="off"
          onChange={event => setTyped(event.currentTarget.value)}
          onBlur={() => {
            if (typed !== undefined) workbench.rename(typed)
            setTyped(undefined)
          }}
          onKeyDown={event => {
            if (event.key === 'Enter') event.currentTarget.blur()
            if (event.key === 'Escape') setTyped(undefined)
          }}
        />
      </span>
    </label>
  )
}

/** Restores the demo; where the author has something to lose it asks first. */
function DemoButton() {
  const workbench = useWorkbench()
  const dialog = useRef<HTMLDialogElement>(null)
  const file = useWorkbenchState(state => state.draft.file)
  function restore() {
    dialog.current?.close()
    workbench.openDemo()
    workbench.sweep()
  }
  return (
    <>
      <button type="button" onClick={() => (workbench.differsFromDemo() ? dialog.current?.showModal() : restore())}>
        Demo
      </button>
      <dialog ref={dialog} className="ask" aria-labelledby="ask-demo">
        <p id="ask-demo">
          The demo takes the place of <code>{file}</code> and of its setting. Both can be brought back right after.
        </p>
        <div className="buttons">
          <button type="button" className="go" onClick={restore}>
            Open the demo
          </button>
          <button type="button" className="go plain" onClick={() => dialog.current?.close()}>
            Stay with this draft
          </button>
        </div>
      </dialog>
    </>
  )
}
