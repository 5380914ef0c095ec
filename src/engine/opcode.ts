import type { Comparison } from '../../grammar/tree'
import type { BinaryFunction } from '../routine'

/** Types of WebAssembly values (WebAssembly Core Specification, section 5.3.1). */
export const I32 = 0x7f
export const I64 = 0x7e
export type ValueType = typeof I32 | typeof I64

/** The instructions that the engine emits (WebAssembly Core Specification, section 5.4). */
export const OP = {
  unreachable: 0x00,
  block: 0x02,
  loop: 0x03,
  if: 0x04,
  else: 0x05,
  end: 0x0b,
  br: 0x0c,
  brIf: 0x0d,
  brTable: 0x0e,
  return: 0x0f,
  call: 0x10,
  select: 0x1b,
  i32Eqz: 0x45,
  localGet: 0x20,
  localSet: 0x21,
  localTee: 0x22,
  memorySize: 0x3f,
  memoryGrow: 0x40,
  i32Const: 0x41,
  i64Const: 0x42,
  i32Store8: 0x3a,
  i32WrapI64: 0xa7,
  i64ExtendI32U: 0xad,
} as const

/** Instructions that come in two widths: the same names for words held in i32 and in i64. */
export interface WordOpcodes {
  readonly type: ValueType
  readonly const: number
  readonly load: number
  readonly store: number
  readonly eqz: number
  readonly eq: number
  readonly ne: number
  readonly ltS: number
  readonly ltU: number
  readonly gtS: number
  readonly gtU: number
  readonly leS: number
  readonly leU: number
  readonly geS: number
  readonly geU: number
  readonly clz: number
  readonly ctz: number
  readonly popcnt: number
  readonly add: number
  readonly sub: number
  readonly mul: number
  readonly divU: number
  readonly remU: number
  readonly and: number
  readonly or: number
  readonly xor: number
  readonly shl: number
  readonly shrU: number
}

export const I32_OPS: WordOpcodes = {
  type: I32,
  const: 0x41,
  load: 0x28,
  store: 0x36,
  eqz: 0x45,
  eq: 0x46,
  ne: 0x47,
  ltS: 0x48,
  ltU: 0x49,
  gtS: 0x4a,
  gtU: 0x4b,
  leS: 0x4c,
  leU: 0x4d,
  geS: 0x4e,
  geU: 0x4f,
  clz: 0x67,
  ctz: 0x68,
  popcnt: 0x69,
  add: 0x6a,
  sub: 0x6b,
  mul: 0x6c,
  divU: 0x6e,
  remU: 0x70,
  and: 0x71,
  or: 0x72,
  xor: 0x73,
  shl: 0x74,
  shrU: 0x76,
}

export const I64_OPS: WordOpcodes = {
  type: I64,
  const: 0x42,
  load: 0x29,
  store: 0x37,
  eqz: 0x50,
  eq: 0x51,
  ne: 0x52,
  ltS: 0x53,
  ltU: 0x54,
  gtS: 0x55,
  gtU: 0x56,
  leS: 0x57,
  leU: 0x58,
  geS: 0x59,
  geU: 0x5a,
  clz: 0x79,
  ctz: 0x7a,
  popcnt: 0x7b,
  add: 0x7c,
  sub: 0x7d,
  mul: 0x7e,
  divU: 0x80,
  remU: 0x82,
  and: 0x83,
  or: 0x84,
  xor: 0x85,
  shl: 0x86,
  shrU: 0x88,
}

/** The instruction of each operation on words that is one. */
export const BINARY_OPCODE = {
  add: 'add',
  subtract: 'sub',
  multiply: 'mul',
  divide: 'divU',
  modulo: 'remU',
  and: 'and',
  or: 'or',
  xor: 'xor',
} as const satisfies Partial<Record<BinaryFunction, keyof WordOpcodes>>

export const UNSIGNED_OPCODE = {
  '=': 'eq',
  '!=': 'ne',
  '<': 'ltU',
  '<=': 'leU',
  '>': 'gtU',
  '>=': 'geU',
} as const satisfies Record<Comparison, keyof WordOpcodes>

export const SIGNED_OPCODE = {
  '=': 'eq',
  '!=': 'ne',
  '<': 'ltS',
  '<=': 'leS',
  '>': 'gtS',
  '>=': 'geS',
} as const satisfies Record<Comparison, keyof WordOpcodes>
