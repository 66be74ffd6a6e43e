import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { must, say } from './process.mjs'

/**
 * Whether the installed packages are those of the lock file. npm writes its own list as the last step of an
 * installation, so one that was cut off has none.
 * @param {string} folder the project's root
 * @returns {boolean}
 */
export function packagesMatch(folder) {
  const wanted = readPackages(join(folder, 'package-lock.json'))
  const installed = readPackages(join(folder, 'node_modules', '.package-lock.json'))
  if (!wanted) return true
  if (!installed) return false
  return Object.entries(wanted).every(([path, entry]) => {
    // The root itself is not installed; an optional package may be for another machine.
    if (path === '' || entry.link) return true
    const found = installed[path]
    if (!found) return entry.optional === true || entry.devOptional === true
    return found.version === entry.version && found.integrity === entry.integrity
  })
}

function readPackages(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8')).packages
  }
  catch (error) {
    if (error.code === 'ENOENT' || error instanceof SyntaxError) return null
    throw error
  }
}

/**
 * Installs the packages of the lock file when what is there differs.
 * @param {string} folder the project's root
 * @param {Record<string, string | undefined>} env
 */
export async function ensurePackages(folder, env) {
  if (packagesMatch(folder)) return
  say('Installing packages from the lock file (about a minute) …')
  await must('The packages could not be installed: npm ci failed; its own words are above.',
    'npm', ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'], { cwd: folder, env })
}
