export { FiguresSection } from './Figures'
