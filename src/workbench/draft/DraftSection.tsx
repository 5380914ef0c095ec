import type { EditorView } from '@codemirror/view'
import { useEffect, useRef } from 'react'
import { formatText } from '../../../grammar'
import { isCheckOf } from '../store/draft'
import { marginCells } from '../store/margin'
import { isStale } from '../store/state'
import { useWorkbench, useWorkbenchState } from '../use'
import { createEditor, replaceText } from './editor'
import { LineCounts } from './LineCounts'
import { showMargin } from './margin'
import { goTo, showMessages } from './messages'
import { ReadingSlot } from './ReadingSlot'
import { RoutineSlot } from './RoutineSlot'

/** Milliseconds without a key after which a message about the line being written is due. */
const REST = 700

const HELP = 'draft-help'

/** The draft, its messages and its counts. */
export function DraftSection() {
  const workbench = useWorkbench()
  const place = useRef<HTMLDivElement>(null)
  const view = useRef<EditorView>(undefined)
  const writtenAt = useRef(0)
  const { draft, checked, record, reading, aim } = useWorkbenchState(state => ({
    draft: state.draft,
    checked: state.checked,
    record: state.record,
    reading: state.reading,
    aim: state.aim,
  }))
  const stale = useWorkbenchState(isStale)

  // biome-ignore lint/correctness/useExhaustiveDependencies: made once; later texts go through replaceText
  useEffect(() => {
    if (!place.current) return
    const editor = createEditor(
      place.current,
      workbench.store.getState().draft.text,
      {
        onWrite(text) {
          writtenAt.current = performance.now()
          workbench.write(text)
        },
        onFormat: format,
        onSweep: () => workbench.sweep(),
      },
      HELP,
    )
    view.current = editor
    return () => {
      view.current = undefined
      editor.destroy()
    }
  }, [workbench])

  function format() {
    const { text, file } = workbench.store.getState().draft
    const { text: formatted, diagnostics } = formatText(text)
    if (formatted === undefined)
      workbench.notify({
        key: 'format',
        tone: 'trouble',
        text: `${file} keeps its layout: line ${diagnostics[0]?.span.line} has to be mended first.`,
        actions: [],
      })
    else if (view.current) {
      workbench.dismiss('format')
      replaceText(view.current, formatted)
      workbench.write(formatted)
    }
  }

  useEffect(() => {
    if (view.current) replaceText(view.current, draft.text)
  }, [draft.text])

  useEffect(() => {
    const editor = view.current
    if (!editor || !isCheckOf(checked, draft)) return
    const show = () => editor.dispatch({ effects: showMessages.of(checked.diagnostics) })
    const line = editor.state.doc.lineAt(editor.state.selection.main.head).number
    const mid = editor.hasFocus && checked.diagnostics.some(({ span }) => span.line === line)
    const rest = REST - (performance.now() - writtenAt.current)
    if (!mid || rest <= 0) return show()
    const due = setTimeout(show, rest)
    return () => clearTimeout(due)
  }, [checked, draft])

  // A new sweep's cells stand by the lines of its own text; while the author writes on they move along.
  const current = record !== undefined && record.text === draft.text
  useEffect(() => {
    const cells = record && current ? marginCells(record, reading) : undefined
    if (cells) view.current?.dispatch({ effects: showMargin.of(cells) })
    else if (!record) view.current?.dispatch({ effects: showMargin.of([]) })
  }, [record, reading, current])

  useEffect(() => {
    const editor = view.current
    if (!editor || !aim) return
    goTo(editor, editor.state.doc.line(Math.min(aim.line, editor.state.doc.lines)).from)
  }, [aim])

  const errors = checked.diagnostics.filter(({ severity }) => severity === 'error')
  return (
    <section id="draft" className={stale ? 'draft is-stale' : 'draft'} aria-label="Draft">
      <div className="draft-head">
        <h2>
          <b className="run-in">Draft.</b> <RoutineSlot />
          <ReadingSlot opens={checked.names.length < 2} />
        </h2>
        <button type="button" className="small" onClick={format} title="Alt+Shift+F">
          Format
        </button>
      </div>
      <p id={HELP} className="sr">
        Tab indents; press Escape and then Tab to leave. Control or Command and Enter sweeps. F8 goes to the next
        message, Alt and Enter carries out its remedy. Alt, Shift and F lays the draft out.
      </p>
      <div className="draft-columns" aria-hidden="true">
        <span className="keys">
          <kbd>Ctrl Enter</kbd> sweeps <kbd>F8</kbd> next <kbd>Alt Enter</kbd> mends <kbd>Esc Tab</kbd> leaves
        </span>
        {record && <span>operations</span>}
      </div>
      <div ref={place} className="draft-text" />
      <p className="sr" role="status">
        {errors.length > 0 &&
          `${errors.length === 1 ? '1 error' : `${errors.length} errors`}. Line ${errors[0]?.span.line}: ${errors[0]?.message} ${errors[0]?.remedy}`}
      </p>
      {record && <LineCounts record={record} reading={reading} />}
    </section>
  )
}
