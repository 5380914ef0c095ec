import { ByteWriter } from './bytes'
import { I32, OP, type ValueType } from './opcode'

/** One function of a module. `body` is its code without the closing `end`, after the declaration of its locals. */
export interface ModuleFunction {
  readonly exported: string
  readonly results: readonly ValueType[]
  readonly locals: ByteWriter
  readonly code: readonly ByteWriter[]
}

/** What an engine's module takes from outside: one memory, and the judge of asserts where there are any. */
export const IMPORTS = { module: 'tally', memory: 'memory', judge: 'judge' } as const

/** Number of the imported judge among the functions. It takes an assert's site and gives 1 where it holds. */
export const JUDGE_FUNCTION = 0

/**
 * The binary form of a module with one imported memory and one exported function without parameters
 * (WebAssembly Core Specification, section 5.5).
 */
export function writeModule(main: ModuleFunction, judged: boolean): Uint8Array<ArrayBuffer> {
  const out = new ByteWriter()
  for (const byte of PREAMBLE) out.byte(byte)
  section(out, SECTION.type, types => {
    types.unsigned(2)
    functionType(types, [], main.results)
    functionType(types, [I32], [I32])
  })
  section(out, SECTION.import, imports => {
    imports.unsigned(judged ? 2 : 1)
    imports.name(IMPORTS.module)
    imports.name(IMPORTS.memory)
    imports.byte(KIND.memory)
    imports.byte(0) // no maximum stated: any memory will do
    imports.unsigned(1)
    if (!judged) return
    imports.name(IMPORTS.module)
    imports.name(IMPORTS.judge)
    imports.byte(KIND.function)
    imports.unsigned(1)
  })
  section(out, SECTION.function, functions => {
    functions.unsigned(1)
    functions.unsigned(0)
  })
  section(out, SECTION.export, exports => {
    exports.unsigned(1)
    exports.name(main.exported)
    exports.byte(KIND.function)
    exports.unsigned(judged ? JUDGE_FUNCTION + 1 : 0)
  })
  section(out, SECTION.code, code => {
    code.unsigned(1)
    const length = main.code.reduce((sum, part) => sum + part.length, main.locals.length + 1)
    code.unsigned(length)
    code.append(main.locals)
    for (const part of main.code) code.append(part)
    code.byte(OP.end)
  })
  return out.toBytes()
}

function section(out: ByteWriter, id: number, write: (content: ByteWriter) => void): void {
  const content = new ByteWriter()
  write(content)
  out.byte(id)
  out.unsigned(content.length)
  out.append(content)
}

function functionType(into: ByteWriter, parameters: readonly ValueType[], results: readonly ValueType[]): void {
  into.byte(FUNCTION_TYPE)
  for (const types of [parameters, results]) {
    into.unsigned(types.length)
    for (const type of types) into.byte(type)
  }
}

/** The magic word and version 1. */
const PREAMBLE = [0x00, 0x61, 0x73, 0x6d, 0x01, 0x00, 0x00, 0x00]
const FUNCTION_TYPE = 0x60
const SECTION = { type: 1, import: 2, function: 3, export: 7, code: 10 } as const
const KIND = { function: 0, memory: 2 } as const
