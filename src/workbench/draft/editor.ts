import { defaultKeymap, history, historyKeymap, indentLess, indentMore, isolateHistory } from '@codemirror/commands'
import { indentService, indentUnit } from '@codemirror/language'
import { Annotation, EditorState, type Extension } from '@codemirror/state'
import {
  type Command,
  drawSelection,
  EditorView,
  highlightActiveLine,
  highlightActiveLineGutter,
  highlightSpecialChars,
  type KeyBinding,
  keymap,
  lineNumbers,
} from '@codemirror/view'
import { colouring } from './colouring'
import { hangingIndent } from './hanging-indent'
import { marginColumns } from './margin'
import { fixHere, goToNextMessage, messages } from './messages'

/** Marks a change that came from the store, so that it is not sent back. */
const fromStore = Annotation.define<boolean>()

export interface EditorCalls {
  readonly onWrite: (text: string) => void
  readonly onFormat: () => void
  readonly onSweep: () => void
}

const INDENT = '  '

/** Lines that open a deeper level. A one-line `if C goto L` opens none. */
const OPENS = /^\s*(routine|begin|procedure|for|while|repeat|else|if(?!.*\bgoto\b))\b/

const indent = indentService.of((context, at) => {
  const { from, number } = context.state.doc.lineAt(at)
  // Asked for the line that is about to be made at `at`: the text before it is the line that is left.
  const before =
    at > from ? context.state.sliceDoc(from, at) : number > 1 ? context.state.doc.line(number - 1).text : ''
  const depth = /^ */.exec(before)![0].length
  return OPENS.test(before) ? depth + INDENT.length : depth
})

/** A tab as blanks; a selection is moved as a whole. */
const tab: Command = view => {
  if (view.state.selection.ranges.some(range => !range.empty)) return indentMore(view)
  if (view.state.readOnly) return false
  view.dispatch(
    view.state.update(view.state.replaceSelection(INDENT), { scrollIntoView: true, userEvent: 'input' }),
  )
  return true
}

function keys({ onFormat, onSweep }: EditorCalls): readonly KeyBinding[] {
  const doing =
    (act: () => void): Command =>
    () => {
      act()
      return true
    }
  return [
    { key: 'Mod-Enter', run: doing(onSweep) },
    { key: 'Alt-Shift-f', run: doing(onFormat) },
    { key: 'F8', run: goToNextMessage },
    { key: 'Alt-Enter', run: fixHere },
    { key: 'Tab', run: tab, shift: indentLess },
  ]
}

function extensions(calls: EditorCalls, describedBy: string): Extension {
  return [
    lineNumbers(),
    highlightActiveLineGutter(),
    highlightActiveLine(),
    highlightSpecialChars(),
    history(),
    drawSelection(),
    indentUnit.of(INDENT),
    indent,
    EditorState.tabSize.of(2),
    EditorView.lineWrapping,
    hangingIndent,
    colouring,
    messages,
    marginColumns,
    keymap.of([...keys(calls), ...defaultKeymap, ...historyKeymap]),
    EditorView.contentAttributes.of({
      'aria-label': 'Draft in tally notation',
      'aria-describedby': describedBy,
      spellcheck: 'false',
      autocapitalize: 'off',
      autocorrect: 'off',
      translate: 'no',
    }),
    EditorView.updateListener.of(update => {
      if (update.docChanged && !update.transactions.some(each => each.annotation(fromStore)))
        calls.onWrite(update.state.doc.toString())
    }),
  ]
}

/** An editor of a draft, in `place`. */
export function createEditor(
  place: HTMLElement,
  text: string,
  calls: EditorCalls,
  describedBy: string,
): EditorView {
  return new EditorView({
    parent: place,
    state: EditorState.create({ doc: text, extensions: extensions(calls, describedBy) }),
  })
}

/** Another text in place of the one there, as a change that can be undone. */
export function replaceText(view: EditorView, text: string): void {
  const { doc } = view.state
  if (doc.toString() === text) return
  view.dispatch({
    changes: { from: 0, to: doc.length, insert: text },
    selection: { anchor: 0 },
    // A change by itself: undoing it does not take along what was typed just before.
    annotations: [fromStore.of(true), isolateHistory.of('full')],
  })
}
