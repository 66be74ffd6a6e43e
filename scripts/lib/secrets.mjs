import { randomBytes } from 'node:crypto'
import { chmodSync, linkSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { Stop } from './process.mjs'

/**
 * @typedef {object} Secrets
 * @property {string} adminPassword of the database user that migrates and grants
 * @property {string} appPassword of the database user that the server works as
 * @property {string} sessionSecret seals session cookies; 48 random bytes as text
 */

/**
 * The secrets of a data folder, made once and readable by their owner alone.
 * @param {string} folder the data folder
 * @returns {Secrets}
 */
export function readSecrets(folder) {
  const file = join(folder, 'secrets.json')
  const fresh = {
    adminPassword: randomBytes(24).toString('hex'),
    appPassword: randomBytes(24).toString('hex'),
    sessionSecret: randomBytes(48).toString('base64url'),
  }
  const draft = `${file}.${process.pid}`
  writeFileSync(draft, `${JSON.stringify(fresh, null, 2)}\n`, { mode: 0o600 })
  try {
    // A link appears whole and never replaces what is there.
    linkSync(draft, file)
  }
  catch (error) {
    if (error.code !== 'EEXIST') throw error
  }
  finally {
    rmSync(draft)
  }
  if ((statSync(file).mode & 0o077) !== 0) chmodSync(file, 0o600)
  const secrets = parse(file)
  for (const name of Object.keys(fresh)) {
    if (typeof secrets[name] !== 'string' || secrets[name].length < 32) {
      throw new Stop(`${file} is damaged: "${name}" is missing or too short. Restore the file from your backup.`)
    }
  }
  return secrets
}

function parse(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'))
  }
  catch (error) {
    if (!(error instanceof SyntaxError)) throw error
    throw new Stop(`${file} is damaged: it is not readable as JSON. Restore the file from your backup.`)
  }
}
