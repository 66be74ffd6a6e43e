import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it, onTestFinished } from 'vitest'
import { findRunning, socketPath, sql, startDatabase, stopDatabase } from '../../../scripts/lib/mariadb.mjs'
import { identity } from '../../../scripts/lib/process.mjs'
import { library, runModule, temporaryFolder } from './helpers'

/** A program that starts the database, fills a table and waits to be killed. */
const KEEPER = `
  import { sql, startDatabase } from '${library('mariadb')}'
  const database = await startDatabase(process.env.FOLDER)
  await sql(database, 'CREATE DATABASE kept; CREATE TABLE kept.t (a INT); INSERT INTO kept.t VALUES (42)')
  console.log(database.pid)
  setInterval(() => {}, 1000)
`

describe('findRunning', () => {
  it('finds nothing in an empty folder', () => {
    expect(findRunning(temporaryFolder())).toBeNull()
  })

  it('does not take another process with the number of the pid file for the database', () => {
    const folder = temporaryFolder()
    writeFileSync(join(folder, 'mariadb.pid'), `${process.pid}\n`)
    expect(findRunning(folder)).toBeNull()
  })
})

describe('socketPath', () => {
  it('lies in the data folder', () => {
    const folder = temporaryFolder()
    expect(socketPath(folder)).toBe(join(folder, 'mariadb.sock'))
  })

  it('lies in a short folder when the system would refuse its length', () => {
    const folder = join(temporaryFolder(), 'x'.repeat(120))
    mkdirSync(folder)
    const path = socketPath(folder)
    expect(Buffer.byteLength(path)).toBeLessThanOrEqual(107)
    expect(path.startsWith(folder)).toBe(false)
  })
})

describe('startDatabase', { timeout: 60_000 }, () => {
  it('takes over the database of a killed run, and starts it again after it was killed too, with all that was acknowledged', async () => {
    const folder = temporaryFolder()
    onTestFinished(async () => {
      await stopDatabase(folder)
    })
    const keeper = runModule(KEEPER, { FOLDER: folder })
    const pid = Number(await keeper.firstLine)
    keeper.child.kill('SIGKILL')
    await keeper.ended

    const adopted = await startDatabase(folder)
    expect(adopted).toMatchObject({ pid, found: true })
    expect(await sql(adopted, 'SELECT a FROM kept.t')).toBe('42')

    process.kill(pid, 'SIGKILL')
    await expect.poll(() => identity(pid)).toBeNull()
    // Its pid file and its socket are still there.
    expect(existsSync(join(folder, 'mariadb.pid'))).toBe(true)
    const again = await startDatabase(folder)
    expect(again).toMatchObject({ found: false, port: adopted.port })
    expect(await sql(again, 'SELECT a FROM kept.t; SELECT @@innodb_flush_log_at_trx_commit, @@global.time_zone')).toBe('42\n1\t+00:00')

    expect(await stopDatabase(folder)).toBe(true)
    expect(findRunning(folder)).toBeNull()
    expect(existsSync(again.socket)).toBe(false)
    expect(readFileSync(join(folder, 'mariadb.log'), 'utf8')).toContain('Shutdown complete')
  })
})
