import { spawnSync } from 'node:child_process'
import { accessSync, constants, existsSync, readFileSync } from 'node:fs'
import { delimiter, join } from 'node:path'

/** Names under which systems install it. */
const NAMES = ['chromium', 'chromium-browser', 'google-chrome']

const ADVICE =
  'Install Chromium (Debian: apt-get install chromium) or set TALLYWORD_CHROMIUM to the path of a Chromium or Chrome.'

/**
 * The Chromium that the browser tests drive: TALLYWORD_CHROMIUM, else the first of the usual names on PATH; undefined
 * where there is none. Throws where the variable points at nothing that can be run.
 */
export function findChromium(): string | undefined {
  const named = process.env.TALLYWORD_CHROMIUM
  if (named) {
    if (isExecutable(named)) return named
    throw new Error(`TALLYWORD_CHROMIUM is ${named}, which is no program that can be run. ${ADVICE}`)
  }
  const folders = (process.env.PATH ?? '').split(delimiter).filter(folder => folder !== '')
  return NAMES.flatMap(name => folders.map(folder => join(folder, name))).find(isExecutable)
}

/** Finds a Chromium, or installs Debian's where that can be done; throws, saying how to get one, where it cannot. */
export function provideChromium(): string {
  const found = findChromium()
  if (found) return found
  if (!canInstall()) throw new Error(`No Chromium for the browser tests. ${ADVICE}`)
  const environment = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
  for (const rest of [['update'], ['install', '--yes', '--no-install-recommends', 'chromium']]) {
    console.log(`apt-get ${rest.join(' ')}`)
    const { status } = spawnSync('apt-get', ['--quiet', '--quiet', ...rest], { stdio: 'inherit', env: environment })
    if (status !== 0) throw new Error(`apt-get ${rest.join(' ')} failed. ${ADVICE}`)
  }
  const installed = findChromium()
  if (!installed) throw new Error(`apt-get installed chromium, yet there is none on PATH. ${ADVICE}`)
  return installed
}

function isExecutable(path: string): boolean {
  try {
    accessSync(path, constants.X_OK)
    return true
  } catch {
    return false
  }
}

/** Debian itself alone: elsewhere the package of that name may be a pointer to another way of installing. */
function canInstall(): boolean {
  const release = '/etc/os-release'
  const isDebian = existsSync(release) && /^ID="?debian"?$/m.test(readFileSync(release, 'utf8'))
  return isDebian && process.getuid?.() === 0 && spawnSync('apt-get', ['--version']).status === 0
}
