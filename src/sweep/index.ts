export { parseCharges, printCharges } from './charges'
export { writeCsv } from './csv'
export { gridPoints, NO_WIDTH } from './grid'
export { parseLets } from './lets'
export { findMismatch } from './mismatch'
export type { Misread } from './misread'
export {
  bindPoint,
  ENGINE_WIDTH,
  failedTrial,
  memoryProblem,
  type PointOptions,
  runBinding,
  runPoint,
  type Way,
  wayProblem,
} from './point'
export { plainCount, writeRecord } from './record'
export type { GridPoint, PointResult, SweepResult, TrialTally, Verdict } from './result'
export { FEED_PATTERNS, type FeedPattern, type Setting, type SizeRange, type WidthChoice } from './setting'
export { parseSizes, parseWhole } from './sizes'
export { runSweep, type SweepOptions } from './sweep'
export { programUnder } from './under'
export { parseWidths, printWidth, widthAt } from './widths'
