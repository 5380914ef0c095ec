import { RangeSetBuilder } from '@codemirror/state'
import { Decoration, type DecorationSet, type EditorView, ViewPlugin, type ViewUpdate } from '@codemirror/view'
import { type TokenKind, tokenizeText } from '../../../grammar'

const marks = new Map<TokenKind, Decoration>()

function markOf(kind: TokenKind): Decoration {
  const known = marks.get(kind) ?? Decoration.mark({ class: `token-${kind}` })
  marks.set(kind, known)
  return known
}

function colour({ state }: EditorView): DecorationSet {
  const builder = new RangeSetBuilder<Decoration>()
  for (const { start, end, kind } of tokenizeText(state.doc.toString()))
    if (end > start) builder.add(start, end, markOf(kind))
  return builder.finish()
}

/** Colours the draft by the same tokens that the parser reads. */
export const colouring = ViewPlugin.fromClass(
  class {
    decorations: DecorationSet

    constructor(view: EditorView) {
      this.decorations = colour(view)
    }

    update(update: ViewUpdate): void {
      if (update.docChanged) this.decorations = colour(update.view)
    }
  },
  { decorations: plugin => plugin.decorations },
)
