import { mkdirSync, statSync } from 'node:fs'
import { resolve } from 'node:path'
import { fileURLToPath } from 'node:url'
import { Stop } from './process.mjs'

/** Absolute path of the project, without a slash at its end. */
export const root = resolve(fileURLToPath(new URL('../..', import.meta.url)))

/**
 * Absolute path of the data folder, made when it is missing.
 * @param {Record<string, string | undefined>} env
 * @returns {string}
 */
export function dataFolder(env) {
  const folder = resolve(root, env.POTBELL_DATA_DIR || '.data')
  try {
    mkdirSync(folder, { recursive: true, mode: 0o700 })
  }
  catch (error) {
    throw new Stop(`The data folder ${folder} cannot be made (${error.code}); POTBELL_DATA_DIR names another one.`)
  }
  const owner = statSync(folder).uid
  if (process.getuid && owner !== process.getuid()) {
    throw new Stop(`The data folder ${folder} belongs to another user of this machine (number ${owner}); start as that user or name another folder with POTBELL_DATA_DIR.`)
  }
  return folder
}
