import { createServer, type AddressInfo } from 'node:net'
import { readdirSync, statSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { describe, expect, it, onTestFinished } from 'vitest'
import { readSecrets } from '../../../scripts/lib/secrets.mjs'
import { checkNode, isLoopback } from '../../../scripts/lib/settings.mjs'
import { takeLock } from '../../../scripts/lib/lock.mjs'
import { runNode, temporaryFolder } from './helpers'

const script = fileURLToPath(new URL('../../../scripts/start.mjs', import.meta.url))

const migrations = fileURLToPath(new URL('../../../scripts/migrate.ts', import.meta.url))

const start = (env: Record<string, string>) => runNode([script], env).ended

describe('npm start', () => {
  it('says in one sentence that the port is taken, before any long work', async () => {
    const server = createServer()
    await new Promise<void>(done => server.listen(0, '127.0.0.1', done))
    onTestFinished(() => void server.close())
    const { port } = server.address() as AddressInfo
    const folder = temporaryFolder()
    expect(await start({ PORT: String(port), POTBELL_DATA_DIR: folder })).toEqual({
      code: 1,
      output: `Port ${port} on 127.0.0.1 is taken by another program: end that one, or choose another port, as in PORT=${port + 1} npm start.\n`,
    })
    expect(readdirSync(folder)).toEqual([])
  })

  it.each([
    [{ PORT: 'http' }, 'PORT must be a whole number from 1 to 65535.\n'],
    [{ PORT: '65536' }, 'PORT must be a whole number from 1 to 65535.\n'],
    [{ DATABASE_URL: 'mysql://a:b@c/d' }, 'DATABASE_URL is set and DATABASE_ADMIN_URL is not: set both to use a database of your own, or neither.\n'],
    [{ DATABASE_ADMIN_URL: 'mysql://a:b@c/d' }, 'DATABASE_ADMIN_URL is set and DATABASE_URL is not: set both to use a database of your own, or neither.\n'],
  ])('stops on %j with the name of the setting', async (env, output) => {
    expect(await start({ POTBELL_DATA_DIR: temporaryFolder(), ...env })).toEqual({ code: 1, output })
  })

  it('names the setting when the database of one\'s own does not answer', async () => {
    const server = createServer()
    await new Promise<void>(done => server.listen(0, '127.0.0.1', done))
    const { port } = server.address() as AddressInfo
    await new Promise<void>(done => server.close(() => done()))
    const url = `mysql://a:b@127.0.0.1:${port}/shop`
    const { code, output } = await runNode(['--import', 'tsx', migrations, 'latest'], { DATABASE_URL: url, DATABASE_ADMIN_URL: url }).ended
    expect(code).toBe(1)
    expect(output).toContain('DATABASE_ADMIN_URL leads to no database that lets the admin in (ECONNREFUSED).')
  }, 30_000)

  it('leaves a data folder to the run that works on it', async () => {
    const folder = temporaryFolder()
    const lock = await takeLock(join(folder, 'run.lock'), 'npm start')
    const { code, output } = await start({ POTBELL_DATA_DIR: folder })
    if (lock.held) lock.release()
    expect(code).toBe(1)
    expect(output).toContain(`"npm start" already works on ${folder} (process ${process.pid})`)
  })
})

describe('checkNode', () => {
  it.each(['20.19.0', '20.20.2'])('accepts %s', version => expect(() => checkNode(version)).not.toThrow())
  it.each(['18.20.0', '20.18.9', '22.0.0'])('refuses %s', version => expect(() => checkNode(version)).toThrow(`this is Node ${version}`))
})

describe('isLoopback', () => {
  it.each(['127.0.0.1', '127.0.1.1', '::1', 'localhost'])('holds for %s', host => expect(isLoopback(host)).toBe(true))
  it.each(['0.0.0.0', '::', '192.168.1.4', '127.0.0.1.example', 'localhost.example'])('does not hold for %s', host => expect(isLoopback(host)).toBe(false))
})

describe('readSecrets', () => {
  it('makes them once, for their owner alone', () => {
    const folder = temporaryFolder()
    const first = readSecrets(folder)
    expect(readSecrets(folder)).toEqual(first)
    expect(statSync(join(folder, 'secrets.json')).mode & 0o777).toBe(0o600)
    expect(Buffer.byteLength(first.sessionSecret)).toBeGreaterThanOrEqual(32)
    expect(readdirSync(folder)).toEqual(['secrets.json'])
  })

  it('makes others for another folder', () => {
    expect(readSecrets(temporaryFolder()).sessionSecret).not.toBe(readSecrets(temporaryFolder()).sessionSecret)
  })
})
