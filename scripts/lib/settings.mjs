import { Stop } from './process.mjs'

/**
 * The settings that are needed before the packages are there. The full check follows as soon as they are.
 * @param {Record<string, string | undefined>} env
 * @returns {{ port: number, host: string, external: boolean, demo: boolean }}
 */
export function readSettings(env) {
  const port = env.PORT || '3000'
  if (!/^\d{1,5}$/.test(port) || Number(port) < 1 || Number(port) > 65535) {
    throw new Stop('PORT must be a whole number from 1 to 65535.')
  }
  if (Boolean(env.DATABASE_URL) !== Boolean(env.DATABASE_ADMIN_URL)) {
    const [set, missing] = env.DATABASE_URL ? ['DATABASE_URL', 'DATABASE_ADMIN_URL'] : ['DATABASE_ADMIN_URL', 'DATABASE_URL']
    throw new Stop(`${set} is set and ${missing} is not: set both to use a database of your own, or neither.`)
  }
  return {
    port: Number(port),
    host: env.HOST || '127.0.0.1',
    external: Boolean(env.DATABASE_URL),
    demo: env.POTBELL_DEMO !== '0',
  }
}

/** Whether an address can be reached from this machine alone. */
export function isLoopback(host) {
  return host === 'localhost' || host === '::1' || /^127(\.\d{1,3}){3}$/.test(host)
}

/**
 * Stops on a Node that the pinned packages do not run on.
 * @param {string} [version]
 */
export function checkNode(version = process.versions.node) {
  const [major = 0, minor = 0] = version.split('.').map(Number)
  if (major !== 20 || minor < 19) throw new Stop(`Potbell runs on Node 20.19 or a later 20; this is Node ${version}.`)
}
