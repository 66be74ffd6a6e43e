import { root } from './paths.mjs'
import { must, run } from './process.mjs'

const args = (file, more) => ['--import', 'tsx', file, ...more]

/**
 * Runs a TypeScript file of the project; a bad end stops everything with the sentence given.
 * @param {string} sentence
 * @param {string} file relative to the root
 * @param {Record<string, string | undefined>} env
 * @param {{ more?: string[], capture?: boolean }} [options]
 * @returns {Promise<string>} what it printed, when captured
 */
export function mustRunFile(sentence, file, env, { more = [], capture = false } = {}) {
  return must(sentence, process.execPath, args(file, more), { cwd: root, env, capture })
}

/** As above, with its own words alone and its own exit code as the answer; it may read from the terminal's input. */
export async function runFile(file, env, more = []) {
  return (await run(process.execPath, args(file, more), { cwd: root, env, stdio: 'inherit' })).code
}
