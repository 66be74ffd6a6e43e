import { findProgram, installFromDebian } from './debian.mjs'
import { Stop } from './process.mjs'

const find = () => findProgram(['chromium', 'chromium-browser'])

/**
 * The browser for the browser tests, installed from Debian when it is missing and we may.
 * @returns {Promise<string>} its absolute path
 */
export async function ensureChromium() {
  if (!find()) await installFromDebian('Chromium', ['chromium'])
  const path = find()
  if (!path) throw new Stop('Chromium was installed but no program of that name is on this machine.')
  return path
}
