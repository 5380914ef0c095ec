import { type ReactNode, useEffect, useRef } from 'react'
import type { SettingProblem } from '../store/setting-text'

export interface EditorFrameProps {
  readonly label: string
  /** Pixels from the sentence's left edge. */
  readonly left: number
  readonly problems: readonly SettingProblem[]
  /** The editor's change makes no new runs: results are weighed again. */
  readonly weigh: boolean
  /** Takes what was edited, and sweeps where asked to. */
  readonly onTake: (sweep: boolean) => void
  /** Leaves everything as it was. */
  readonly onLeave: () => void
  readonly children: ReactNode
}

/** What every slot's editor has: a place below the sentence, Enter and Esc, and buttons that say what they do. */
export function EditorFrame(props: EditorFrameProps) {
  const { label, left, problems, weigh, onTake, onLeave, children } = props
  const form = useRef<HTMLFormElement>(null)
  useEffect(() => {
    const first = form.current?.querySelector<HTMLElement>('[data-first]') ?? form.current?.querySelector('input')
    first?.focus()
    if (first instanceof HTMLInputElement && first.type === 'text') first.select()
  }, [])

  function take(sweep: boolean) {
    if (problems.length === 0) onTake(sweep)
    else form.current?.querySelector<HTMLElement>('[aria-invalid=true]')?.focus()
  }

  return (
    <div
      className="editor"
      role="dialog"
      aria-label={label}
      style={{ '--left': `${left}px` } as React.CSSProperties}
    >
      <form
        ref={form}
        noValidate
        onSubmit={event => {
          event.preventDefault()
          take(!weigh)
        }}
        onKeyDown={event => {
          if (event.key !== 'Escape') return
          event.stopPropagation()
          onLeave()
        }}
      >
        {children}
        <div className="buttons">
          <button type="submit" className="go">
            {weigh ? 'Weigh with these' : 'Sweep'}
          </button>
          {!weigh && (
            <button type="button" className="go plain" onClick={() => take(false)}>
              Keep, sweep later
            </button>
          )}
          <button type="button" className="leave" onClick={onLeave}>
            <kbd>Esc</kbd> <span>leaves it as it was</span>
          </button>
        </div>
      </form>
    </div>
  )
}
