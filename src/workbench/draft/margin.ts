import { type Extension, RangeSet, StateEffect, StateField, type Text } from '@codemirror/state'
import { type EditorView, GutterMarker, gutter } from '@codemirror/view'
import { digitGroups } from '../marks/Count'
import type { MarginCell, VerdictWord } from '../store/margin'

/** Puts cells beside the lines as they are numbered now. */
export const showMargin = StateEffect.define<readonly MarginCell[]>()

interface Placed {
  /** Start of the cell's line. */
  readonly at: number
  readonly marker: CellMarker
}

interface Margin {
  readonly placed: readonly Placed[]
  readonly markers: RangeSet<GutterMarker>
}

const EMPTY: Margin = { placed: [], markers: RangeSet.empty }

/** Cells move with their lines; a line that is deleted takes its cell along. */
const margin = StateField.define<Margin>({
  create: () => EMPTY,
  update(known, transaction) {
    for (const effect of transaction.effects)
      if (effect.is(showMargin)) return place(transaction.state.doc, effect.value)
    if (!transaction.docChanged || known.placed.length === 0) return known
    const { changes, newDoc } = transaction
    const moved = new Map<number, CellMarker>()
    for (const { at, marker } of known.placed) {
      // With what is typed before it on its line the cell stays, with a line put in above it moves.
      const from = newDoc.lineAt(changes.mapPos(at, 1)).from
      if (!moved.has(from)) moved.set(from, marker)
    }
    return put([...moved].map(([at, marker]) => ({ at, marker })))
  },
})

function place(doc: Text, cells: readonly MarginCell[]): Margin {
  return put(
    cells
      .filter(({ line }) => line <= doc.lines)
      .map(cell => {
        const { from, length } = doc.line(cell.line)
        return { at: from, marker: new CellMarker(cell, length) }
      }),
  )
}

function put(placed: readonly Placed[]): Margin {
  return {
    placed,
    markers: RangeSet.of(
      placed.map(({ at, marker }) => marker.range(at)),
      true,
    ),
  }
}

/** Pixels of the costliest line's bar. */
const BAR = 48
/** Pixels of the word beside a line that was expanded. */
const NOTE = 72
/** Shares of the routine's time from which a count is set bold, and below which it is set back. */
const HOT = 0.1
const COLD = 0.01

const WORDS: Readonly<Record<VerdictWord, string>> = {
  holds: 'holds',
  'so far': 'so far',
  broken: 'broken',
  undecided: 'undecided',
  fails: 'fails',
}

class CellMarker extends GutterMarker {
  constructor(
    readonly cell: MarginCell,
    /** Signs on the cell's line. */
    readonly length: number,
  ) {
    super()
  }

  override eq(other: CellMarker): boolean {
    return this.length === other.length && JSON.stringify(this.cell) === JSON.stringify(other.cell)
  }

  override toDOM(view: EditorView): HTMLElement {
    const { cell } = this
    const row = document.createElement('div')
    row.className = `cell cell-${cell.kind}`
    if (cell.kind === 'verdict') {
      row.classList.add(`verdict-${cell.word.replace(' ', '-')}`)
      const word = document.createElement('span')
      word.append(verdictMark(cell.word), WORDS[cell.word])
      row.append(word)
      return row
    }
    const count = document.createElement('span')
    count.className = 'count'
    const [first, ...rest] = digitGroups(String(cell.time))
    count.append(first ?? '')
    for (const group of rest) {
      const set = document.createElement('i')
      set.textContent = group
      count.append(set)
    }
    row.append(count)
    if (cell.kind === 'time') {
      if (cell.share >= HOT) row.classList.add('hot')
      else if (cell.share < COLD) row.classList.add('cold')
      const bar = document.createElement('s')
      bar.style.width = `${Math.max(cell.bar * BAR, cell.time > 0 ? 1 : 0)}px`
      row.append(bar)
      if (cell.expanded !== undefined) {
        row.title = `Expanded: ${cell.expanded.toFixed(1)} operations a use on average, all of them in this line's count`
        // Beside the code where there is room, never over it.
        if (this.length * view.defaultCharacterWidth + NOTE < view.contentDOM.clientWidth) {
          const note = document.createElement('em')
          note.textContent = 'expanded'
          row.append(note)
        }
      }
    }
    return row
  }
}

function verdictMark(word: VerdictWord): SVGElement {
  const space = 'http://www.w3.org/2000/svg'
  const mark = document.createElementNS(space, 'svg')
  mark.setAttribute('viewBox', '-5 -5 10 10')
  mark.setAttribute('aria-hidden', 'true')
  const cross = word === 'broken' || word === 'fails'
  const shape = document.createElementNS(space, cross ? 'path' : 'circle')
  if (cross) shape.setAttribute('d', 'M-3.6 -3.6L3.6 3.6M3.6 -3.6L-3.6 3.6')
  else shape.setAttribute('r', '3.4')
  mark.append(shape)
  return mark
}

/** Counts and verdicts in columns to the right of the code. */
export const marginColumns: Extension = [
  margin,
  gutter({
    class: 'margin',
    side: 'after',
    markers: (view: EditorView) => view.state.field(margin).markers,
  }),
]
