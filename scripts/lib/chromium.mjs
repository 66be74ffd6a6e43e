import { findProgram, installFromDebian } from './debian.mjs'
import { Stop } from './process.mjs'

const find = () => findProgram(['chromium', 'chromium-browser'])

async function findOrInstall() {
  if (!find()) await installFromDebian('Chromium', ['chromium'])
  const path = find()
  if (!path) throw new Stop('Chromium was installed but no program of that name is on this machine.')
  return path
}

let asked

/**
 * The browser for the browser tests, installed from Debian when it is missing and we may; once, whoever asks beside whom.
 * @returns {Promise<string>} its absolute path
 */
export function ensureChromium() {
  asked ??= findOrInstall()
  return asked
}
