import { useWorkbench, useWorkbenchState } from '../use'

/** What the page has to say, under its head. */
export function Notices() {
  const workbench = useWorkbench()
  const notices = useWorkbenchState(state => state.notices)
  return (
    <div className="notices" role="status">
      {notices.map(({ key, tone, text, actions }) => (
        <div key={key} className={`notice ${tone}`} role={tone === 'trouble' ? 'alert' : undefined}>
          <p>{text}</p>
          <span className="buttons">
            {actions.map(({ label, act, stays }) => (
              <button
                key={label}
                type="button"
                className="act"
                onClick={() => {
                  act()
                  if (!stays) workbench.dismiss(key)
                }}
              >
                {label}
              </button>
            ))}
            <button type="button" className="close" aria-label="Dismiss" onClick={() => workbench.dismiss(key)}>
              <svg viewBox="-6 -6 12 12" width="12" height="12" aria-hidden="true">
                <path d="M-4 -4L4 4M4 -4L-4 4" />
              </svg>
            </button>
          </span>
        </div>
      ))}
    </div>
  )
}
