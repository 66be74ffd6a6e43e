import { createRequire } from 'node:module'
import { join } from 'node:path'
import { findRunning, sql, startDatabase, stopDatabase } from '../lib/mariadb.mjs'
import { root } from '../lib/paths.mjs'
import { openTestFolder, openTestServer, openTestShop } from '../lib/test-shop.mjs'

/** Packages are there only once the command has seen to them, so they are loaded late. */
export const require = createRequire(join(root, 'package.json'))

/**
 * @typedef {object} Place where a bench measures: a database of its own with a demo shop in each schema
 * @property {string} folder
 * @property {Awaited<ReturnType<typeof openTestShop>>} shop
 * @property {Record<string, string>} env scrubbed
 * @property {boolean} quick
 */

/**
 * @param {Record<string, string>} env scrubbed
 * @param {{ quick: boolean }} options
 * @returns {Promise<Place>}
 */
export async function openPlace(env, { quick }) {
  const folder = await openTestFolder()
  return { folder, env, quick, shop: await openTestShop(folder, env, ['bench', 'bench-large']) }
}

/** A built server of the product as a shop runs it, on a schema of the place. */
export function serveProduct(place, suite, more = {}) {
  return openTestServer(place.shop, suite, more)
}

/** Statements as the owner of the place's database. */
export function asOwner(place, statements) {
  return sql({ ...findRunning(place.folder), folder: place.folder }, statements)
}

/** Ends the database cleanly and starts it as the product does: what was set for filling it is gone, its pages are cold. */
export async function restartDatabase(place) {
  await stopDatabase(place.folder)
  await startDatabase(place.folder)
}
