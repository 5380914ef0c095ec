import { Component, type ReactNode } from 'react'
import type { Workbench } from './store/workbench'

interface Props {
  readonly workbench: Workbench
  readonly children: ReactNode
}

interface State {
  readonly fault: string | undefined
}

/** A fault of ours in drawing a part of the page: said in full, with the draft to take away. */
export class FaultBoundary extends Component<Props, State> {
  override state: State = { fault: undefined }

  static getDerivedStateFromError(error: unknown): State {
    return { fault: error instanceof Error ? error.message : String(error) }
  }

  override render(): ReactNode {
    const { fault } = this.state
    if (fault === undefined) return this.props.children
    return (
      <section className="fault" role="alert">
        <p>
          This part of the page broke off by a fault of its own: {fault}. The draft is safe: save it, then try
          again.
        </p>
        <div className="buttons">
          <button type="button" className="act" onClick={() => this.props.workbench.save()}>
            Save the draft
          </button>
          <button type="button" className="act" onClick={() => this.setState({ fault: undefined })}>
            Try again
          </button>
        </div>
      </section>
    )
  }
}
