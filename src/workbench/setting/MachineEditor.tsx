import { useState } from 'react'
import type { InstructionSetName, OffPolicy } from '../../machine/machine'
import { splitList } from '../../sweep/misread'
import { parseWidths } from '../../sweep/widths'
import { DashKey, MarkerKey } from '../marks/Marker'
import { useWorkbench } from '../use'
import { Forecast } from './Forecast'
import { type EditorProps, marking, Problem, Row } from './field'
import { OffUses } from './OffUses'
import { SET_ORDER } from './sentence-parts'

interface Chip {
  readonly key: number
  readonly text: string
}

const SET_LABELS: Readonly<Record<InstructionSetName, readonly [string, string]>> = {
  full: ['with multiplication', 'add, logic, shift, multiply'],
  'no-multiply': ['without multiplication', 'add, logic, shift'],
  'add-only': ['by addition alone', 'add'],
  extended: ['with every class', 'divide and bitscan too'],
}

const OFF_POLICIES: readonly (readonly [OffPolicy, string])[] = [
  ['expand', 'is expanded and counted'],
  ['refuse', 'is refused'],
]

/** Word widths and instruction sets. */
export function MachineEditor(props: EditorProps) {
  const { text, problems, focus, onChange } = props
  return (
    <>
      <WidthRow {...props} />
      <Row label="Instructions">
        <div className="options stacked">
          {SET_ORDER.map((set, place) => (
            <label key={set} className="option">
              <input
                type="checkbox"
                checked={text.sets.includes(set)}
                data-first={focus === 'sets' && place === 0 ? '' : undefined}
                {...marking(problems, 'sets')}
                onChange={() =>
                  onChange({
                    ...text,
                    sets: SET_ORDER.filter(each => (each === set) !== text.sets.includes(each)),
                  })
                }
              />
              <DashKey set={set} />
              <span>
                {SET_LABELS[set][0]} <small>{SET_LABELS[set][1]}</small>
              </span>
            </label>
          ))}
        </div>
        <Problem problems={problems} field="sets" />
      </Row>
      <Row label="What is off">
        <div className="options">
          {OFF_POLICIES.map(([off, word]) => (
            <label key={off} className="option">
              <input
                type="radio"
                name="off"
                checked={text.off === off}
                onChange={() => onChange({ ...text, off })}
              />
              <span>{word}</span>
            </label>
          ))}
        </div>
        <OffUses sets={text.sets} off={text.off} />
      </Row>
      <Forecast setting={props.setting} />
    </>
  )
}

function tiesOf(size: string): readonly (readonly [string, React.ReactNode])[] {
  const n = <i>{size}</i>
  return [
    [`ceil(lg(${size}))`, <>⌈lg {n}⌉</>],
    [`2*lg(${size})`, <>2 lg {n}</>],
    [`lg(${size})^2`, <>lg² {n}</>],
    [
      `${size}^0.5`,
      <>
        {n}
        <sup>1/2</sup>
      </>,
    ],
  ]
}

/** A list of widths, a chip each: numbers, ranges, expressions in the sizes. */
function WidthRow({ text, shape, problems, focus, onChange }: EditorProps) {
  const workbench = useWorkbench()
  // Chips keep their own keys, so that a chip that is typed in keeps the focus while its neighbours come and go.
  const [chips, setChips] = useState<readonly Chip[]>(() =>
    splitList(text.widths).map((part, key) => ({ key, text: part })),
  )
  const [fresh, setFresh] = useState<number>()
  function put(next: readonly Chip[]) {
    setChips(next)
    onChange({ ...text, widths: next.map(chip => chip.text).join(', ') })
  }
  function add(added: string) {
    const key = Math.max(-1, ...chips.map(chip => chip.key)) + 1
    setFresh(key)
    put([...chips, { key, text: added }])
  }
  const wrong = (chip: Chip) => 'problem' in parseWidths(chip.text, shape.sizes)
  const problem = workbench.tryWith(text).problems.some(({ field }) => field === 'widths')
  let place = 0
  return (
    <Row
      label={
        <>
          Width <i>w</i>
        </>
      }
    >
      <div className="chips">
        {chips.map((chip, at) => {
          const read = parseWidths(chip.text, shape.sizes)
          const first = place
          if ('widths' in read) place += read.widths.length
          return (
            <span key={chip.key} className="chip">
              <MarkerKey width={first} set="full" />
              <input
                type="text"
                className="figure"
                inputMode={/^\d*$/.test(chip.text) ? 'numeric' : 'text'}
                aria-label={`Width ${at + 1}`}
                value={chip.text}
                size={Math.max(3, chip.text.length)}
                spellCheck={false}
                autoComplete="off"
                data-first={focus === 'widths' && at === 0 ? '' : undefined}
                ref={chip.key === fresh ? input => input?.focus() : undefined}
                {...(problem && wrong(chip) ? marking(problems, 'widths') : {})}
                onChange={event => {
                  setFresh(undefined)
                  put(chips.map(each => (each === chip ? { ...each, text: event.currentTarget.value } : each)))
                }}
              />
              <button
                type="button"
                aria-label={`Remove width ${chip.text}`}
                disabled={chips.length === 1}
                onClick={() => put(chips.filter(each => each !== chip))}
              >
                ×
              </button>
            </span>
          )
        })}
        <button type="button" className="add" onClick={() => add('')}>
          Add
        </button>
      </div>
      {shape.sizes.length > 0 && (
        <div className="ties">
          <span>tied to {shape.sizes.join(', ')}:</span>
          {tiesOf(shape.sizes[0]!).map(([expression, shown]) => (
            <button
              key={expression}
              type="button"
              className="add"
              aria-label={`Add width ${expression}`}
              onClick={() => add(expression)}
            >
              {shown}
            </button>
          ))}
        </div>
      )}
      <Problem problems={problems} field="widths" />
    </Row>
  )
}
