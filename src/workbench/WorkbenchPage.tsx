import type { ReactNode } from 'react'
import { DraftSection } from './draft/DraftSection'
import { GridSection } from './grid/GridSection'
import { DropZone } from './head/DropZone'
import { Head } from './head/Head'
import { Notices } from './head/Notices'
import { type Layout, useLayout } from './layout'
import { SettingSection } from './setting/Setting'

type Part = 'draft' | 'lead'

/** The order in which the parts are read, which is the order of the document too: focus follows the eye. */
const ORDER: Readonly<Record<Layout, readonly Part[]>> = {
  wide: ['draft', 'lead'],
  two: ['draft', 'lead'],
  one: ['lead', 'draft'],
  narrow: ['lead', 'draft'],
}

/** The whole page. */
export function WorkbenchPage() {
  const layout = useLayout()
  const parts: Readonly<Record<Part, ReactNode>> = {
    // Keyed, so that another order moves the draft's editor instead of making it anew.
    draft: <DraftSection key="draft" />,
    lead: (
      <div key="lead" className="lead">
        <GridSection />
      </div>
    ),
  }
  return (
    <>
      <a className="skip" href="#draft">
        Go to the draft
      </a>
      <Head />
      <Notices />
      <SettingSection />
      <main className="paper">{ORDER[layout].map(part => parts[part])}</main>
      <DropZone />
    </>
  )
}
