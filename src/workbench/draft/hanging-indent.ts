import { RangeSetBuilder } from '@codemirror/state'
import { Decoration, type DecorationSet, type EditorView, ViewPlugin, type ViewUpdate } from '@codemirror/view'

/** Columns by which the rest of a wrapped line stands further in than its start. */
const HANG = 4
/** Past this the rest of a line would have no room on a narrow screen. */
const MOST = 12

function hang(view: EditorView): DecorationSet {
  const builder = new RangeSetBuilder<Decoration>()
  for (const { from, to } of view.visibleRanges)
    for (let at = from; at <= to; ) {
      const line = view.state.doc.lineAt(at)
      const columns = Math.min(MOST, /^ */.exec(line.text)![0].length + HANG)
      builder.add(line.from, line.from, Decoration.line({ attributes: { style: `--hang: ${columns}ch` } }))
      at = line.to + 1
    }
  return builder.finish()
}

/** Sets the rest of a line that is too long for the screen further in than its start. */
export const hangingIndent = ViewPlugin.fromClass(
  class {
    decorations: DecorationSet

    constructor(view: EditorView) {
      this.decorations = hang(view)
    }

    update(update: ViewUpdate): void {
      if (update.docChanged || update.viewportChanged) this.decorations = hang(update.view)
    }
  },
  { decorations: plugin => plugin.decorations },
)
