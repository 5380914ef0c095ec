import { spawnSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { provideChromium } from './browser/chromium'

// `npm test`: every check in order, all of them even where one fails. The last line gives the sum; the exit code is 1
// where anything failed. Format and lint, types, and the build count as one check each; a skipped test counts as failed.

const ROOT = resolve(import.meta.dirname, '..')
const BINARIES = join(ROOT, 'node_modules', '.bin')
const reports = mkdtempSync(join(tmpdir(), 'tallyword-test-'))

interface Outcome {
  readonly passed: number
  readonly failed: number
}

interface Report {
  readonly numPassedTests: number
  readonly numFailedTests: number
  readonly numPendingTests: number
  readonly numTodoTests: number
  readonly testResults: readonly {
    readonly name: string
    readonly status: string
    readonly assertionResults: readonly { readonly status: string; readonly fullName: string }[]
  }[]
}

function run(program: string, options: readonly string[], environment: NodeJS.ProcessEnv = {}): boolean {
  const { status, error } = spawnSync(join(BINARIES, program), options, {
    cwd: ROOT,
    stdio: 'inherit',
    env: { ...process.env, ...environment },
    shell: process.platform === 'win32',
  })
  if (error) console.error(error.message)
  return status === 0
}

function check(program: string, ...options: string[]): Outcome {
  return run(program, options) ? { passed: 1, failed: 0 } : { passed: 0, failed: 1 }
}

function tests(name: string, options: readonly string[], environment: NodeJS.ProcessEnv = {}): Outcome {
  const file = join(reports, `${name}.json`)
  const succeeded = run(
    'vitest',
    ['run', '--reporter=default', '--reporter=json', `--outputFile.json=${file}`, ...options],
    environment,
  )
  let report: Report
  try {
    report = JSON.parse(readFileSync(file, 'utf8'))
  } catch {
    console.error(`The ${name} tests ended without a report.`)
    return { passed: 0, failed: 1 }
  }
  const skipped = report.numPendingTests + report.numTodoTests
  if (skipped > 0) {
    console.error(`${skipped} skipped:`)
    for (const test of report.testResults.flatMap(result => result.assertionResults))
      if (test.status !== 'passed' && test.status !== 'failed') console.error(`  ${test.fullName}`)
  }
  // A file that broke before its first test has no failed test to show for it.
  const broken = report.testResults.filter(
    result => result.status === 'failed' && !result.assertionResults.some(test => test.status === 'failed'),
  )
  for (const { name: broke } of broken) console.error(`Could not be run: ${broke}`)
  const failed = report.numFailedTests + skipped + broken.length
  return { passed: report.numPassedTests, failed: failed === 0 && !succeeded ? 1 : failed }
}

function browserTests(): Outcome {
  try {
    const TALLYWORD_CHROMIUM = provideChromium()
    return tests('browser', ['--config', 'test/browser/vitest.config.ts'], { TALLYWORD_CHROMIUM })
  } catch (error) {
    console.error(error instanceof Error ? error.message : error)
    return { passed: 0, failed: 1 }
  }
}

const steps: readonly (readonly [string, () => Outcome])[] = [
  ['format and lint', () => check('biome', 'check', '--error-on-warnings', '.')],
  ['types', () => check('tsc', '--noEmit')],
  ['unit tests and outside checks', () => tests('unit', [])],
  ['build', () => check('vite', 'build')],
  ['browser tests', browserTests],
]

let passed = 0
let failed = 0
for (const [title, step] of steps) {
  console.log(`\n== ${title}`)
  const outcome = step()
  passed += outcome.passed
  failed += outcome.failed
  if (outcome.failed > 0) console.log(`== ${title}: ${outcome.failed} failed`)
}
rmSync(reports, { recursive: true, force: true })
console.log(`\n${passed} passed, ${failed} failed`)
process.exitCode = failed > 0 ? 1 : 0
