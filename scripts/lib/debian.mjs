import { accessSync, constants, statSync } from 'node:fs'
import { delimiter, join } from 'node:path'
import { Stop, must, say } from './process.mjs'

/** An ordinary user's PATH leaves out the folders where Debian keeps servers. */
const MORE_FOLDERS = ['/usr/local/bin', '/usr/bin', '/bin', '/usr/local/sbin', '/usr/sbin', '/sbin']

/**
 * The absolute path of a program, or null.
 * @param {string[]} names in order of preference
 * @param {string} [path] folders to search, as in PATH
 */
export function findProgram(names, path = process.env.PATH ?? '') {
  for (const name of names) {
    for (const folder of [...path.split(delimiter).filter(Boolean), ...MORE_FOLDERS]) {
      const file = join(folder, name)
      if (isProgram(file)) return file
    }
  }
  return null
}

function isProgram(file) {
  try {
    accessSync(file, constants.X_OK)
    return statSync(file).isFile()
  }
  catch {
    return false
  }
}

/**
 * Installs packages from Debian, when we may.
 * @param {string} what the thing that is missing, for people
 * @param {string[]} packages
 */
export async function installFromDebian(what, packages) {
  const apt = findProgram(['apt-get'])
  const byHand = `apt-get install --no-install-recommends ${packages.join(' ')}`
  if (!apt) throw new Stop(`${what} is missing on this machine: install it with your system's packages (on Debian: ${byHand}), then start again.`)
  if (process.getuid?.() !== 0) throw new Stop(`${what} is missing on this machine: install it once with "sudo ${byHand}", then start again.`)
  say(`Installing ${what} from Debian's packages …`)
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
  const wait = ['-o', 'DPkg::Lock::Timeout=300']
  const failed = `${what} could not be installed: "${byHand}" failed.`
  await must(failed, apt, ['update', '-q', ...wait], { env, capture: true })
  await must(failed, apt, ['install', '-y', '-q', '--no-install-recommends', ...wait, ...packages], { env, capture: true })
}
