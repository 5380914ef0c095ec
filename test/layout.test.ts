import { spawnSync } from 'node:child_process'
import { readdirSync, readFileSync, statSync } from 'node:fs'
import { dirname, extname, join, relative, resolve, sep } from 'node:path'
import { parseSync } from 'vite'
import { describe, expect, test } from 'vitest'

const ROOT = resolve(import.meta.dirname, '..')

const CORE = ['grammar', 'routine', 'machine']

/** What the files of each room may import from, besides their own room. */
const MAY_IMPORT: Readonly<Record<string, readonly string[]>> = {
  grammar: [],
  routine: ['grammar'],
  machine: ['grammar', 'routine'],
  engine: CORE,
  feed: CORE,
  shelf: CORE,
  sweep: [...CORE, 'engine', 'feed'],
  finding: [...CORE, 'engine', 'feed', 'sweep', 'shelf'],
  sheet: [...CORE, 'engine', 'feed', 'sweep', 'shelf', 'finding'],
  headless: [...CORE, 'engine', 'feed', 'sweep', 'shelf', 'finding', 'sheet'],
  workbench: [...CORE, 'engine', 'feed', 'sweep', 'shelf', 'finding', 'sheet'],
}

/** Packages of the page, which no other room may know. */
const PAGE_PACKAGES = /^(react|react-dom|recharts|zustand|codemirror|@codemirror\/[^/]+|@lezer\/[^/]+)(\/|$)/

const TOP_LEVEL = new Set([
  'package.json',
  'package-lock.json',
  'vite.config.ts',
  'tsconfig.json',
  'biome.json',
  'index.html',
  'README.md',
  'DEVELOPERS.md',
  'LICENSE',
  'src',
  'grammar',
  'test',
  'public',
  '.ci',
  '.gitignore',
])

const MOST_LINES = 500

function filesUnder(folder: string): string[] {
  return readdirSync(folder, { withFileTypes: true }).flatMap(entry =>
    entry.isDirectory() ? filesUnder(join(folder, entry.name)) : [join(folder, entry.name)],
  )
}

const sources = [...filesUnder(join(ROOT, 'grammar')), ...filesUnder(join(ROOT, 'src'))].filter(file =>
  ['.ts', '.tsx'].includes(extname(file)),
)

/** The room of a file: `grammar`, or the folder of src that it stands in; undefined outside all rooms. */
function roomOf(file: string): string | undefined {
  const [top, second] = relative(ROOT, file).split(sep)
  if (top === 'grammar') return 'grammar'
  return top === 'src' ? second : undefined
}

/** Every module that a file names: imports and re-exports, of types too, `import()` in code and in types. */
function importsOf(file: string, text = readFileSync(file, 'utf8')): string[] {
  const { program, errors } = parseSync(file, text)
  if (errors.length > 0) throw new Error(`${file}: ${errors[0]?.message}`)
  const found: string[] = []
  collect(program)
  return found

  function collect(node: unknown): void {
    if (Array.isArray(node)) for (const item of node) collect(item)
    else if (node !== null && typeof node === 'object') {
      const { type, source } = node as { type?: string; source?: unknown }
      if (type !== undefined && source !== null && typeof source === 'object') {
        const { value } = source as { value?: unknown }
        if (typeof value !== 'string') throw new Error(`${file}: ${type} of a module that is no plain string`)
        found.push(value)
      }
      for (const child of Object.values(node)) collect(child)
    }
  }
}

const imports = sources.flatMap(file => importsOf(file).map(module => ({ file: relative(ROOT, file), module })))

describe('imports', () => {
  test('are found in every form', () => {
    const forms = [
      `import { a } from './a'`,
      `import type { B } from './b'`,
      `import './c'`,
      `export * from './d'`,
      `export type { E } from './e'`,
      `export type F = import('./f').F`,
      `export const g = () => import('./g')`,
    ]
    expect(importsOf('forms.ts', forms.join('\n'))).toEqual(['./a', './b', './c', './d', './e', './f', './g'])
  })

  test('run one way between the rooms', () => {
    const wrong = imports.filter(({ file, module }) => {
      // A file inside a package is that package's.
      if (!module.startsWith('.') || module.includes('/node_modules/')) return false
      const from = roomOf(join(ROOT, file))
      const to = roomOf(resolve(ROOT, dirname(file), module))
      return from !== to && !(from && to && MAY_IMPORT[from]?.includes(to))
    })
    expect(wrong).toEqual([])
  })

  test('of the page stay in the workbench', () => {
    const wrong = imports.filter(
      ({ file, module }) => roomOf(join(ROOT, file)) !== 'workbench' && PAGE_PACKAGES.test(module),
    )
    expect(wrong).toEqual([])
  })

  test('of Node stay in the headless room', () => {
    const wrong = imports.filter(
      ({ file, module }) => roomOf(join(ROOT, file)) !== 'headless' && module.startsWith('node:'),
    )
    expect(wrong).toEqual([])
  })
})

/** Dependencies that run or build the rooms, and are imported by none. */
const TOOLS = ['tsx', '@vitejs/plugin-react']

test('the listed dependencies are the packages that the rooms import', () => {
  const { dependencies } = JSON.parse(readFileSync(join(ROOT, 'package.json'), 'utf8'))
  const packages = imports.flatMap(({ module }) => {
    const inside = /\/node_modules\/(.*)/.exec(module)?.[1] ?? module
    return /^(?!\.|node:)((?:@[^/]+\/)?[^/]+)/.exec(inside)?.[1] ?? []
  })
  expect([...new Set([...packages, ...TOOLS])].sort()).toEqual(Object.keys(dependencies).sort())
})

test('the core compiles without the DOM and without Node', () => {
  const tsc = join(ROOT, 'node_modules', '.bin', 'tsc')
  const { stdout, status } = spawnSync(tsc, ['-p', join(import.meta.dirname, 'core.tsconfig.json')], {
    encoding: 'utf8',
  })
  expect({ status, stdout }).toEqual({ status: 0, stdout: '' })
})

test(`no source file is longer than ${MOST_LINES} lines`, () => {
  const long = sources
    .map(file => ({ file: relative(ROOT, file), lines: readFileSync(file, 'utf8').split('\n').length }))
    .filter(({ lines }) => lines > MOST_LINES)
  expect(long).toEqual([])
})

test('every source file stands in a room', () => {
  expect(sources.map(file => roomOf(file)).filter(room => room === undefined || !(room in MAY_IMPORT))).toEqual([])
})

test('the top level holds nothing else', () => {
  const { stdout, status } = spawnSync('git', ['ls-files', '--cached', '--others', '--exclude-standard'], {
    cwd: ROOT,
    encoding: 'utf8',
  })
  const names =
    status === 0
      ? stdout.split('\n').filter(name => name !== '')
      : readdirSync(ROOT).filter(name => !['node_modules', 'dist', '.git'].includes(name))
  const tops = new Set(names.map(name => name.split('/')[0] ?? ''))
  expect([...tops].filter(name => !TOP_LEVEL.has(name))).toEqual([])
  expect(statSync(join(ROOT, 'package.json')).isFile()).toBe(true)
})
