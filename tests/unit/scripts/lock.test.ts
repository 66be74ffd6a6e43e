import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { isAlive, readHolder, takeLock, withLock } from '../../../scripts/lib/lock.mjs'
import { identity } from '../../../scripts/lib/process.mjs'
import { library, runModule, temporaryFolder } from './helpers'

/** A program that takes the lock, starts a child that outlives it, and waits. */
const HOLDER = `
  import { takeLock } from '${library('lock')}'
  import { start } from '${library('process')}'
  await takeLock(process.env.LOCK, 'holder')
  const child = start(process.execPath, ['-e', 'setInterval(() => {}, 1000)'], { stdio: 'ignore' })
  console.log(child.pid)
  setInterval(() => {}, 1000)
`

describe('takeLock', () => {
  it('takes a free lock and gives it back', async () => {
    const file = join(temporaryFolder(), 'run.lock')
    const lock = await takeLock(file, 'a test')
    expect(lock).toMatchObject({ held: true, leftover: false })
    expect(readHolder(file)).toMatchObject({ pid: process.pid, what: 'a test' })
    if (lock.held) lock.release()
    expect(existsSync(file)).toBe(false)
  })

  it('leaves a lock to a holder that lives, and names it', async () => {
    const file = join(temporaryFolder(), 'run.lock')
    const holder = runModule(HOLDER, { LOCK: file })
    await holder.firstLine
    expect(await takeLock(file, 'a test')).toMatchObject({ held: false, holder: { pid: holder.pid, what: 'holder' } })
    // Its child is ended with the lock that it leaves.
    holder.child.kill('SIGKILL')
    await holder.ended
    expect(await takeLock(file, 'a test')).toMatchObject({ held: true, leftover: true })
  })

  it('clears the lock of a killed run and ends the children that it left running', async () => {
    const file = join(temporaryFolder(), 'run.lock')
    const holder = runModule(HOLDER, { LOCK: file })
    const orphan = Number(await holder.firstLine)
    holder.child.kill('SIGKILL')
    await holder.ended
    expect(identity(orphan)).not.toBeNull()
    expect(await takeLock(file, 'a test')).toMatchObject({ held: true, leftover: true })
    expect(identity(orphan)).toBeNull()
  })

  it('does not take another process with the same number for the holder', async () => {
    const file = join(temporaryFolder(), 'run.lock')
    writeFileSync(file, JSON.stringify({ pid: process.pid, born: 'long ago', what: 'a killed run', children: [{ pid: process.ppid, born: 'long ago' }] }))
    expect(isAlive(readHolder(file))).toBe(false)
    expect(await takeLock(file, 'a test')).toMatchObject({ held: true, leftover: true })
    expect(identity(process.ppid)).not.toBeNull()
  })

  it('clears a lock file that was cut off', async () => {
    const file = join(temporaryFolder(), 'run.lock')
    writeFileSync(file, '{"pid": 1')
    expect(await takeLock(file, 'a test')).toMatchObject({ held: true, leftover: true })
  })
})

describe('withLock', () => {
  it('lets only one in at a time', async () => {
    const file = join(temporaryFolder(), 'one.lock')
    const text = `
      import { appendFileSync } from 'node:fs'
      import { withLock } from '${library('lock')}'
      await withLock(process.env.LOCK, 'turn', async () => {
        appendFileSync(process.env.LOG, 'in ')
        await new Promise(done => setImmediate(done))
        appendFileSync(process.env.LOG, 'out ')
      })
    `
    const log = join(temporaryFolder(), 'log')
    const programs = Array.from({ length: 4 }, () => runModule(text, { LOCK: file, LOG: log }))
    const codes = await Promise.all(programs.map(async program => (await program.ended).code))
    expect(codes).toEqual([0, 0, 0, 0])
    expect(readFileSync(log, 'utf8')).toBe('in out '.repeat(4))
  })

  it('gives the lock back after a failure', async () => {
    const file = join(temporaryFolder(), 'one.lock')
    await expect(withLock(file, 'turn', () => Promise.reject(new Error('no')))).rejects.toThrow('no')
    expect(existsSync(file)).toBe(false)
  })
})
