import type { ReactNode } from 'react'
import { DraftSection } from './draft/DraftSection'
import { FaultBoundary } from './FaultBoundary'
import { FiguresSection } from './figures'
import { GridSection } from './grid/GridSection'
import { DropZone } from './head/DropZone'
import { Head } from './head/Head'
import { Notices } from './head/Notices'
import { type Layout, useLayout } from './layout'
import { SettingSection } from './setting/Setting'
import { ClaimsSection, PointsSection, TallySection } from './tables'
import { useWorkbench } from './use'

type Part = 'draft' | 'lead' | 'figures' | 'tally' | 'points'

/** The order in which the parts are read, which is the order of the document too: focus follows the eye. */
const ORDER: Readonly<Record<Layout, readonly Part[]>> = {
  wide: ['draft', 'lead', 'figures', 'tally', 'points'],
  two: ['draft', 'lead', 'figures', 'tally', 'points'],
  one: ['lead', 'draft', 'figures', 'tally', 'points'],
  narrow: ['lead', 'draft', 'figures', 'tally', 'points'],
}

/** The whole page. */
export function WorkbenchPage() {
  const workbench = useWorkbench()
  const layout = useLayout()
  const parts: Readonly<Record<Part, ReactNode>> = {
    // Keyed, so that another order moves the draft's editor instead of making it anew.
    draft: (
      <FaultBoundary key="draft" workbench={workbench}>
        <DraftSection />
      </FaultBoundary>
    ),
    lead: (
      <div key="lead" className="lead">
        <FaultBoundary workbench={workbench}>
          <ClaimsSection />
        </FaultBoundary>
        <FaultBoundary workbench={workbench}>
          <GridSection />
        </FaultBoundary>
      </div>
    ),
    figures: (
      <FaultBoundary key="figures" workbench={workbench}>
        <FiguresSection />
      </FaultBoundary>
    ),
    tally: (
      <FaultBoundary key="tally" workbench={workbench}>
        <TallySection />
      </FaultBoundary>
    ),
    points: (
      <FaultBoundary key="points" workbench={workbench}>
        <PointsSection />
      </FaultBoundary>
    ),
  }
  return (
    <>
      <a className="skip" href="#draft">
        Go to the draft
      </a>
      <Head />
      <Notices />
      <FaultBoundary workbench={workbench}>
        <SettingSection />
      </FaultBoundary>
      <nav className="jump" aria-label="Parts of the page">
        <a href="#claims">Claims</a>
        <a href="#grid">Grid</a>
        <a href="#draft">Draft</a>
        <a href="#figures">Figures</a>
        <a href="#tally">Tally</a>
        <a href="#points">Points</a>
      </nav>
      <main className="paper">{ORDER[layout].map(part => parts[part])}</main>
      <DropZone />
    </>
  )
}
