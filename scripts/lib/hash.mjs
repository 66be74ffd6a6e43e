import { createHash } from 'node:crypto'
import { lstatSync, readFileSync, readdirSync, readlinkSync } from 'node:fs'
import { join } from 'node:path'

/** What stands at the root but is no part of a build. */
const NOT_BUILT = new Set([
  '.git', '.ci', '.nuxt', '.output', '.data', 'node_modules', 'dist', 'coverage',
  'docs', 'tests', 'scripts', 'seeds',
  '.gitignore', '.nvmrc', 'knexfile.ts', 'eslint.config.mjs', 'knip.json', 'knip.ts',
  'vitest.config.ts', 'vitest.server.config.ts', 'vitest.e2e.config.ts',
])

const isText = name => name.endsWith('.md') || name.endsWith('.log')

/**
 * The hash of everything a build is made from: sources, lock file and Node's version. Names and contents count, times
 * do not: in a fresh clone they say nothing.
 * @param {string} folder the project's root
 * @param {string} [nodeVersion]
 * @returns {string} SHA-256, hex
 */
export function hashSources(folder, nodeVersion = process.version) {
  const hash = createHash('sha256')
  add(hash, 'node', nodeVersion)
  const names = readdirSync(folder).filter(name => !NOT_BUILT.has(name) && !isText(name))
  for (const name of names.sort()) walk(hash, folder, name)
  return hash.digest('hex')
}

/** Lengths stand before the bytes, so that no two trees give the same stream. */
function add(hash, name, bytes) {
  const content = Buffer.from(bytes)
  hash.update(`${Buffer.byteLength(name)}:${name}:${content.length}:`).update(content)
}

function walk(hash, folder, path) {
  const full = join(folder, path)
  const stat = lstatSync(full)
  if (stat.isDirectory()) {
    for (const name of readdirSync(full).sort()) walk(hash, folder, `${path}/${name}`)
  }
  else if (stat.isSymbolicLink()) {
    add(hash, path, readlinkSync(full))
  }
  else if (stat.isFile()) {
    add(hash, path, readFileSync(full))
  }
}
