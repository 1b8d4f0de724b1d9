/** The programs that come from Debian: installed when we may, else we say which command does it. */
import { existsSync, rmSync, writeFileSync } from 'node:fs'
import { Refusal } from './paths.mjs'
import { findProgram, run, succeeds } from './process.mjs'

const PROGRAMS = [
  { package: 'mariadb-server', program: 'mariadbd', for: 'database' },
  { package: 'mariadb-server', program: 'mariadb-install-db', for: 'database' },
  { package: 'chromium', program: 'chromium', for: 'pdf' },
  { package: 'poppler-utils', program: 'pdftotext', for: 'pdf' },
]
const NO_SERVICES = '/usr/sbin/policy-rc.d'

function install(packages) {
  const asRoot = process.getuid?.() === 0 ? [] : ['sudo', '-n']
  const apt = (...args) => {
    const [command, ...rest] = [...asRoot, 'env', 'DEBIAN_FRONTEND=noninteractive', 'apt-get', ...args]
    run(command, rest)
  }
  // The package would start a system service of its own; ours runs from the project's folder only.
  const mute = asRoot.length === 0 && !existsSync(NO_SERVICES)
  if (mute) writeFileSync(NO_SERVICES, '#!/bin/sh\nexit 101\n', { mode: 0o755 })
  try {
    apt('update')
    apt('install', '-y', '--no-install-recommends', ...packages)
  }
  finally {
    if (mute) rmSync(NO_SERVICES, { force: true })
  }
}

/** Makes sure that the programs are there; without a local database when one is given by DATABASE_URL. */
export function ensureDebianPackages({ database = true } = {}) {
  const missing = PROGRAMS.filter(one => (database || one.for !== 'database') && !findProgram(one.program))
  const packages = [...new Set(missing.map(one => one.package))]
  if (packages.length === 0) return
  const command = `sudo apt-get update && sudo apt-get install -y --no-install-recommends ${packages.join(' ')}`
  if (!findProgram('apt-get')) {
    throw new Refusal(`These programs are missing: ${missing.map(one => one.program).join(', ')}. On Debian 12: ${command}`)
  }
  if (process.getuid?.() !== 0 && !(findProgram('sudo') && succeeds('sudo', ['-n', 'true']))) {
    throw new Refusal(`Polewright needs ${packages.join(', ')}, and may not install them here. Run this once, then start again:\n\n  ${command}`)
  }
  console.log(`Installing ${packages.join(', ')} …`)
  install(packages)
  const still = missing.filter(one => !findProgram(one.program))
  if (still.length) throw new Refusal(`${still.map(one => one.program).join(', ')} could not be installed. Run: ${command}`)
}
