import type { Program } from '../routine'
import { CompiledProgram } from './compiled'

export { type ExpansionUse, expandProgram, listExpansions } from './expand'
export type { CompiledProgram }

/** Compiles a program for one width, 2 to 64. Throws a RangeError past that. */
export function compileProgram(program: Program, width: number): Promise<CompiledProgram> {
  return CompiledProgram.compile(program, width)
}

/** The same at once, for workers and the command. */
export function compileProgramSync(program: Program, width: number): CompiledProgram {
  return CompiledProgram.compileSync(program, width)
}

/** Takes up the `module` of a program compiled on another thread. */
export function adoptModule(program: Program, width: number, module: WebAssembly.Module): CompiledProgram {
  return CompiledProgram.adopt(program, width, module)
}
