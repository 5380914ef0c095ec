import { marginCells } from '../store/margin'
import { pointWords } from '../store/point-words'
import type { Reading, SweepRecord } from '../store/record'

/** The margin as a table for screen readers: the columns beside the code are for the eye alone. */
export function LineCounts(props: { readonly record: SweepRecord; readonly reading: Reading | undefined }) {
  const { record, reading } = props
  const point = reading && record.points[reading.point]
  const lines = record.text.split('\n')
  return (
    <table className="sr">
      <caption>Operations by line{point && `, at ${pointWords(point)}`}</caption>
      <thead>
        <tr>
          <th scope="col">line</th>
          <th scope="col">text</th>
          <th scope="col">operations or verdict</th>
          <th scope="col">note</th>
        </tr>
      </thead>
      <tbody>
        {marginCells(record, reading).map(cell => (
          <tr key={cell.line}>
            <th scope="row">{cell.line}</th>
            <td>{lines[cell.line - 1]?.trim()}</td>
            <td>{cell.kind === 'verdict' ? cell.word : String(cell.time)}</td>
            <td>{cell.kind === 'time' && cell.expanded !== undefined && 'expanded'}</td>
          </tr>
        ))}
      </tbody>
    </table>
  )
}
