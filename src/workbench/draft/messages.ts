import { isolateHistory } from '@codemirror/commands'
import { type EditorState, type Range, StateEffect, StateField, type Text } from '@codemirror/state'
import { Decoration, type DecorationSet, EditorView, WidgetType } from '@codemirror/view'
import type { Diagnostic } from '../../../grammar'

/** Blocks of messages past this many only push the draft apart. */
const MOST_BLOCKS = 12

/** Shows what is said of the text as it stands. */
export const showMessages = StateEffect.define<readonly Diagnostic[]>()

interface Shown {
  readonly decorations: DecorationSet
  readonly diagnostics: readonly Diagnostic[]
}

const NOTHING: Shown = { decorations: Decoration.none, diagnostics: [] }

/** Underlines and message blocks; they move with the text until the next check. */
export const messages = StateField.define<Shown>({
  create: () => NOTHING,
  update(shown, transaction) {
    for (const effect of transaction.effects)
      if (effect.is(showMessages)) return show(transaction.state.doc, effect.value)
    if (!transaction.docChanged) return shown
    return { decorations: shown.decorations.map(transaction.changes), diagnostics: [] }
  },
  provide: field => EditorView.decorations.from(field, shown => shown.decorations),
})

function show(doc: Text, diagnostics: readonly Diagnostic[]): Shown {
  if (diagnostics.length === 0) return NOTHING
  const ranges: Range<Decoration>[] = []
  for (const [place, diagnostic] of diagnostics.entries()) {
    const { span, severity } = diagnostic
    const start = Math.min(span.start, doc.length)
    const line = doc.lineAt(start)
    // A span past one line is underlined on its first; one without width takes the sign before it.
    const end = Math.min(Math.max(span.end, start), line.to)
    const from = end > start ? start : Math.max(line.from, start - 1)
    const to = Math.max(end, from + (line.to > from ? 1 : 0))
    if (to > from) ranges.push(Decoration.mark({ class: `trouble trouble-${severity}` }).range(from, to))
    if (place < MOST_BLOCKS)
      ranges.push(Decoration.widget({ widget: new MessageBlock(diagnostic), block: true, side: 1 }).range(line.to))
  }
  return { decorations: Decoration.set(ranges, true), diagnostics }
}

/** A message under its line: cause, remedy, and the remedy as a button where it can be carried out. */
class MessageBlock extends WidgetType {
  constructor(readonly diagnostic: Diagnostic) {
    super()
  }

  override eq(other: MessageBlock): boolean {
    const { span, severity, message, remedy, fix, path } = this.diagnostic
    const { diagnostic } = other
    return (
      diagnostic.span.line === span.line &&
      diagnostic.severity === severity &&
      diagnostic.message === message &&
      diagnostic.remedy === remedy &&
      JSON.stringify(diagnostic.fix) === JSON.stringify(fix) &&
      JSON.stringify(diagnostic.path) === JSON.stringify(path)
    )
  }

  override toDOM(view: EditorView): HTMLElement {
    const { span, severity, message, remedy, fix, path } = this.diagnostic
    // The editor measures blocks without their margins: the space around the message is padding of a frame.
    const frame = document.createElement('div')
    frame.className = 'message-frame'
    const block = document.createElement('div')
    block.className = `message message-${severity}`
    frame.append(block)
    const says = document.createElement('p')
    const place = document.createElement('b')
    place.textContent = `Line ${span.line}.`
    says.append(place, ' ', ...withCode(message), ' ', ...withCode(remedy))
    block.append(says)
    const buttons = document.createElement('p')
    buttons.className = 'buttons'
    if (fix) buttons.append(button(fix.label, () => applyFix(view, this.diagnostic)))
    for (const { span: at, note } of path ?? [])
      buttons.append(button(`Line ${at.line}: ${note}`, () => goTo(view, at.start)))
    if (buttons.childElementCount > 0) block.append(buttons)
    return frame
  }

  override ignoreEvent(): boolean {
    return true
  }
}

function button(label: string, act: () => void): HTMLElement {
  const made = document.createElement('button')
  made.type = 'button'
  made.className = 'act'
  // In one piece: the button sets its parts apart by itself otherwise.
  const words = document.createElement('span')
  words.append(...withCode(label))
  made.append(words)
  made.addEventListener('click', act)
  return made
}

/** Text in which what stands between backquotes is code. */
function withCode(text: string): (string | HTMLElement)[] {
  return text.split('`').map((part, place) => {
    if (place % 2 === 0) return part
    const code = document.createElement('code')
    code.textContent = part
    return code
  })
}

/** Carries out a remedy, as a change that can be undone. */
export function applyFix(view: EditorView, { fix }: Diagnostic): boolean {
  if (!fix) return false
  const changes = fix.edits.map(({ start, end, text }) => ({ from: start, to: end, insert: text }))
  const last = changes.at(-1)
  const set = view.state.changes(changes)
  view.dispatch({
    changes: set,
    ...(last && { selection: { anchor: set.mapPos(last.to, 1) } }),
    userEvent: 'input.fix',
    annotations: isolateHistory.of('full'),
    scrollIntoView: true,
  })
  view.focus()
  return true
}

export function goTo(view: EditorView, at: number): void {
  const anchor = Math.min(at, view.state.doc.length)
  view.dispatch({ selection: { anchor }, effects: EditorView.scrollIntoView(anchor, { y: 'center' }) })
  view.focus()
}

function diagnosticsOf(state: EditorState): readonly Diagnostic[] {
  return state.field(messages).diagnostics
}

/** To the next message after the cursor, and round again. */
export function goToNextMessage(view: EditorView): boolean {
  const diagnostics = diagnosticsOf(view.state)
  const { head } = view.state.selection.main
  const next = diagnostics.find(({ span }) => span.start > head) ?? diagnostics[0]
  if (!next) return false
  goTo(view, next.span.start)
  return true
}

/** Carries out the remedy of a message on the cursor's line. */
export function fixHere(view: EditorView): boolean {
  const line = view.state.doc.lineAt(view.state.selection.main.head).number
  const here = diagnosticsOf(view.state).find(({ span, fix }) => fix && span.line === line)
  return here ? applyFix(view, here) : false
}
