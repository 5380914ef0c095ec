import '../style/tables.css'

export { ClaimsSection } from './ClaimsSection'
export { PointsSection } from './PointsSection'
export { TallySection } from './TallySection'
