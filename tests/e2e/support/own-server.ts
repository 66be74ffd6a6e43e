import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import type { Knex } from 'knex'
import { serverEnvironment } from '../../../scripts/lib/environment.mjs'
import { freePort } from '../../../scripts/lib/net.mjs'
import { endTree } from '../../../scripts/lib/process.mjs'
import { serve } from '../../../scripts/lib/serve.mjs'
import { demoPassword } from '#shared/utils/demo'
import { hashSecret } from '../../../server/utils/password'
import type { Shop } from '../../factories/shop'

/** The built server, started by a test on a database that nobody else works on, always at the same address. */
export interface OwnServer {
  url: string
  start(): Promise<void>
  /** Ends the process, as a power cut or an update does. */
  stop(): Promise<void>
  close(): Promise<void>
}

/** @param databaseUrl of the application's user */
export async function ownServer(databaseUrl: string): Promise<OwnServer> {
  const host = '127.0.0.1'
  const port = await freePort()
  const dataFolder = mkdtempSync(join(tmpdir(), 'potbell-own-'))
  const env = { ...serverEnvironment(process.env as Record<string, string>, { databaseUrl, sessionSecret: 'a server of a browser test alone, 0123456789', host, port, dataFolder }), POTBELL_TEST_CLOCK: '1' }
  let child: Awaited<ReturnType<typeof serve>>['child'] | null = null
  async function stop(): Promise<void> {
    if (child?.pid) await endTree(child.pid, 1200)
    child = null
  }
  return {
    url: `http://${host}:${port}`,
    async start() {
      child = (await serve({ env, host, port, stdio: ['ignore', 'ignore', 'inherit'] })).child
    },
    stop,
    async close() {
      await stop()
      rmSync(dataFolder, { recursive: true, force: true })
    },
  }
}

/** Lets the shop's foreman sign in as the demo's does. */
export async function letForemanIn(admin: Knex, shop: Shop): Promise<void> {
  await admin('users').where({ id: shop.users.foreman }).update({ email: 'foreman@potbell.example', password_hash: await hashSecret(demoPassword) })
}
