import { useMemo } from 'react'
import { CrossKey, DiscKey } from '../marks/Marker'
import { isStale } from '../store/state'
import { useWorkbench, useWorkbenchState } from '../use'
import { type Finding, findClaims, findingPlace, summariseClaims } from './claims'

/** Every claim and check with its verdict over the sweep. */
export function ClaimsSection() {
  const workbench = useWorkbench()
  const stale = useWorkbenchState(isStale)
  const record = useWorkbenchState(state => state.record)
  const findings = useMemo(() => (record ? findClaims(record) : []), [record])
  if (!record) return null
  return (
    <section id="claims" className={stale ? 'claims is-stale' : 'claims'} aria-label="Claims">
      <h2>
        <b className="run-in">Claims.</b> {summariseClaims(findings, record.status === 'running')}
      </h2>
      <ul>
        {findings.map(finding => (
          <li key={finding.key}>
            <code>{finding.text}</code>
            <p className="remark">
              <Outcome outcome={finding.outcome} /> {finding.before}
              {finding.at && (
                <>
                  {' '}
                  <button
                    type="button"
                    className="slot"
                    onClick={() =>
                      finding.at && workbench.read({ point: finding.at.point.index, trial: finding.at.trial })
                    }
                  >
                    {findingPlace(finding.at.point)}
                  </button>
                </>
              )}
              {finding.after}
            </p>
          </li>
        ))}
      </ul>
    </section>
  )
}

function Outcome({ outcome }: { readonly outcome: Finding['outcome'] }) {
  if (outcome === 'broken')
    return (
      <b className="verdict-broken">
        <CrossKey />
        Broken.
      </b>
    )
  if (outcome === 'holds')
    return (
      <b>
        <DiscKey />
        Holds.
      </b>
    )
  return null
}
