import { execFileSync, spawnSync } from 'node:child_process'
import { existsSync } from 'node:fs'

const PLACES = [
  process.env.CHROMIUM,
  '/usr/bin/chromium',
  '/usr/bin/chromium-browser',
  '/usr/bin/google-chrome',
  '/usr/bin/google-chrome-stable',
  '/Applications/Google Chrome.app/Contents/MacOS/Google Chrome',
  '/Applications/Chromium.app/Contents/MacOS/Chromium',
  'C:\\Program Files\\Google\\Chrome\\Application\\chrome.exe',
]

/** Flags that keep the browser quiet on a machine without network or GPU. */
export const CHROMIUM_FLAGS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  '--no-first-run',
]

function found(): string | null {
  return PLACES.find((place) => place !== undefined && place !== '' && existsSync(place)) ?? null
}

/** Path of a system Chromium; installs Debian's package when it may; otherwise throws one clear sentence. */
export function findChromium(): string {
  const here = found()
  if (here !== null) return here
  const root = process.getuid?.() === 0
  if (root && spawnSync('apt-get', ['--version']).status === 0) {
    console.info('No Chromium found; installing the system package `chromium` ...')
    execFileSync('apt-get', ['update', '-qq'], { stdio: 'inherit' })
    execFileSync('apt-get', ['install', '-y', '-qq', '--no-install-recommends', 'chromium'], {
      stdio: ['ignore', 'ignore', 'inherit'],
      env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
    })
    const installed = found()
    if (installed !== null) return installed
  }
  throw new Error(
    'The browser tests need Chromium or Chrome and found none. Install it (Debian: apt-get install chromium) ' +
      'or set the environment variable CHROMIUM to its path, then run npm test again.',
  )
}
