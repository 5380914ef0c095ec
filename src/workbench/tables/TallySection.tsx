import { useMemo } from 'react'
import { listExpansions } from '../../engine/expand'
import type { Count as CountValue } from '../../machine'
import { INSTRUCTION_SETS } from '../../machine/machine'
import { printCharges } from '../../sweep/charges'
import { ratioText } from '../figures/captions'
import { Count } from '../marks/Count'
import { DashKey } from '../marks/Marker'
import { pointWords, SHORT_SET_WORDS, sizeWords } from '../store/point-words'
import { isStale } from '../store/state'
import { useWorkbenchState } from '../use'
import { classRows, expandedWords, type SetTally, SPACE_WORDS, talliesAt } from './tally-table'

/** Operations by class and words of space at the point read, instruction sets side by side. */
export function TallySection() {
  const stale = useWorkbenchState(isStale)
  const { record, reading } = useWorkbenchState(state => ({ record: state.record, reading: state.reading }))
  const tallies = useMemo(() => (record && reading ? talliesAt(record, reading) : []), [record, reading])
  if (!record) return null
  const point = reading && record.points[reading.point]
  const several = tallies.length > 1
  const place = point
    ? several
      ? [sizeWords(point), `w = ${point.width}`].filter(Boolean).join(', ')
      : pointWords(point)
    : ''
  const counted = tallies.some(({ tally }) => tally)
  return (
    <section id="tally" className={stale ? 'notes is-stale' : 'notes'} aria-label="Tally">
      <div className="note">
        <h2>
          <b className="run-in">Tally by class.</b>{' '}
          {counted
            ? `At ${place}${record.setting.trials > 1 ? `, trial ${(reading?.trial ?? 0) + 1}` : ''}.`
            : 'No count there.'}
        </h2>
        {counted && <ClassTable tallies={tallies} charged={printCharges(record.setting.charges)} />}
        <ul className="remarks">
          {tallies.flatMap(({ set, tally }) =>
            (tally?.expanded ?? []).map(use => (
              <li key={`${set} ${use.line} ${use.class}`}>
                <details className="expansion">
                  <summary>
                    {several && `${SHORT_SET_WORDS[set]}, `}
                    {expandedWords(use)}
                  </summary>
                  {listExpansions(record.program, INSTRUCTION_SETS[set])
                    .filter(each => each.line === use.line && each.class === use.class)
                    .map(each => (
                      <pre key={each.text}>
                        <code>{each.text}</code>
                      </pre>
                    ))}
                </details>
              </li>
            )),
          )}
        </ul>
      </div>
      <div className="note">
        <h2>
          <b className="run-in">Words of space.</b> {counted ? `At ${place}.` : 'No count there.'}
        </h2>
        {counted && <SpaceTable tallies={tallies} />}
      </div>
    </section>
  )
}

function SetHeads({ tallies }: { readonly tallies: readonly SetTally[] }) {
  return tallies.map(({ set }) => (
    <th key={set} scope="col">
      {tallies.length > 1 ? (
        <>
          <DashKey set={set} />
          {SHORT_SET_WORDS[set]}
        </>
      ) : (
        'operations'
      )}
    </th>
  ))
}

function ClassTable({ tallies, charged }: { readonly tallies: readonly SetTally[]; readonly charged: string }) {
  const rows = classRows(tallies)
  const most = Math.max(1, ...rows.flatMap(row => row.counts.map(count => count ?? 0)))
  const [first, second] = tallies
  const ratio =
    first?.time !== undefined && second?.time !== undefined && Number(first.time) > 0
      ? Number(second.time) / Number(first.time)
      : undefined
  return (
    <div className="scroll">
      <table className="figures-table">
        <thead>
          <tr>
            <th scope="col">
              <span className="sr">class</span>
            </th>
            <SetHeads tallies={tallies} />
            <td />
          </tr>
        </thead>
        <tbody>
          {rows.map(row => (
            <tr key={row.class}>
              <th scope="row">{row.class}</th>
              {row.counts.map((count, at) => (
                <td key={tallies[at]!.set}>{count === undefined ? 'not run' : <Count of={count} />}</td>
              ))}
              <td className="bars" aria-hidden="true">
                {row.counts.map((count, at) => (
                  <i
                    key={tallies[at]!.set}
                    className={at === 0 ? 'bar' : 'bar hollow'}
                    style={{ width: `${(44 * (count ?? 0)) / most}px` }}
                  />
                ))}
              </td>
            </tr>
          ))}
        </tbody>
        <tfoot>
          <TotalRow
            name="all"
            values={tallies.map(
              ({ tally }) => tally && Object.values(tally.byClass).reduce((sum, each) => sum + each, 0),
            )}
            tallies={tallies}
            remark={charged === 'unit' && ratio !== undefined ? `${ratioText(ratio)} ×` : ''}
          />
          {charged !== 'unit' && (
            <TotalRow
              name={`charged ${charged}`}
              values={tallies.map(({ time }) => time)}
              tallies={tallies}
              remark={ratio === undefined ? '' : `${ratioText(ratio)} ×`}
            />
          )}
        </tfoot>
      </table>
    </div>
  )
}

function TotalRow(props: {
  readonly name: string
  readonly values: readonly (CountValue | undefined)[]
  readonly tallies: readonly SetTally[]
  readonly remark: string
}) {
  return (
    <tr>
      <th scope="row">{props.name}</th>
      {props.values.map((value, at) => (
        <td key={props.tallies[at]!.set}>{value === undefined ? 'not run' : <Count of={value} />}</td>
      ))}
      <td>{props.remark}</td>
    </tr>
  )
}

function SpaceTable({ tallies }: { readonly tallies: readonly SetTally[] }) {
  const differ = SPACE_WORDS.some(
    ({ name }) => new Set(tallies.flatMap(({ tally }) => (tally ? [tally.space[name]] : []))).size > 1,
  )
  const shown = differ ? tallies : tallies.filter(({ tally }) => tally).slice(0, 1)
  return (
    <div className="scroll">
      <table className="figures-table">
        <thead>
          <tr>
            <th scope="col">
              <span className="sr">kind</span>
            </th>
            {differ ? <SetHeads tallies={shown} /> : <th scope="col">words</th>}
          </tr>
        </thead>
        <tbody>
          {SPACE_WORDS.map(({ name, says }) => (
            <tr key={name}>
              <th scope="row">{says}</th>
              {shown.map(({ set, tally }) => (
                <td key={set}>{tally ? <Count of={tally.space[name]} /> : 'not run'}</td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}
