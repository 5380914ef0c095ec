export type { Diagnostic, Edit } from './diagnostic'
export { type ParsedText, parseCondition, parseExact, parseText } from './parse'
export { joinSpans, type Span } from './span'
export type * from './tree'
