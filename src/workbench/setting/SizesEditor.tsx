import { printExact } from '../../../grammar'
import { parseSizes } from '../../sweep/sizes'
import { useWorkbenchState } from '../use'
import { Forecast } from './Forecast'
import { type EditorProps, marking, Problem, Row } from './field'

/** Values of the routine's sizes, a row each, and of its lets. */
export function SizesEditor({ text, shape, problems, setting, onChange }: EditorProps) {
  const declared = useWorkbenchState(state => state.checked.program?.routine.lets)
  const [first] = shape.sizes
  return (
    <>
      {shape.sizes.map((name, place) => {
        const written = place === 0 ? text.first : (text.others[name] ?? '')
        const put = (value: string) =>
          onChange(place === 0 ? { ...text, first: value } : { ...text, others: { ...text.others, [name]: value } })
        return (
          <Row
            key={name}
            label={
              <>
                Size <i>{name}</i>
              </>
            }
          >
            <input
              type="text"
              className="figure long"
              aria-label={`Values of ${name}`}
              value={written}
              placeholder={place > 0 ? `the same as ${first}` : undefined}
              spellCheck={false}
              autoComplete="off"
              data-first={place === 0 ? '' : undefined}
              {...marking(problems, `size ${name}`)}
              onChange={event => put(event.currentTarget.value)}
            />
            <Problem problems={problems} field={`size ${name}`} />
            <p className="remark" aria-live="polite">
              {valuesIn(written)}
            </p>
          </Row>
        )
      })}
      {shape.sizes.length > 0 && (
        <p className="remark below">
          <code>2^6..2^16</code> doubles, <code>100..1000 by 100</code> steps, <code>8, 16, 100</code> lists; commas
          join them.
        </p>
      )}
      {shape.lets.map((name, place) => {
        const standard = declared?.find(known => known.name === name)?.value
        return (
          <Row
            key={name}
            label={
              <>
                Let <i>{name}</i>
              </>
            }
          >
            <input
              type="text"
              className="figure"
              aria-label={`Value of ${name}`}
              value={text.lets[name] ?? ''}
              placeholder={standard ? `${printExact(standard)}, as declared` : 'as declared'}
              size={20}
              spellCheck={false}
              autoComplete="off"
              data-first={place === 0 && shape.sizes.length === 0 ? '' : undefined}
              {...marking(problems, `let ${name}`)}
              onChange={event => onChange({ ...text, lets: { ...text.lets, [name]: event.currentTarget.value } })}
            />
            <Problem problems={problems} field={`let ${name}`} />
          </Row>
        )
      })}
      <Forecast setting={setting} />
    </>
  )
}

function valuesIn(written: string): string {
  const read = parseSizes(written)
  if ('problem' in read) return ''
  const { values } = read.range
  const shown = values.length <= 6 ? values : [...values.slice(0, 3), '…', values.at(-1)]
  return `${values.length === 1 ? '1 size' : `${values.length} sizes`}: ${shown.join(', ')}`
}
