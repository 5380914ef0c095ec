export { type FigureRow, writeFigureCsv } from './figure-csv'
export { stateModel, UNIT_COST_NOTE } from './model-statement'
