import { linkSync, mkdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { dirname } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { endTree, identity, watchChildren } from './process.mjs'

/** @typedef {{ pid: number, born: string | null, what: string, children: { pid: number, born: string | null }[] }} Holder */

/**
 * Reads who holds a lock.
 * @param {string} file
 * @returns {Holder | null} null when there is no lock file, or one that cannot be read
 */
export function readHolder(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'))
  }
  catch (error) {
    if (error.code === 'ENOENT' || error instanceof SyntaxError) return null
    throw error
  }
}

/** Whether the process that wrote this still runs; its number alone could be another's by now. */
export function isAlive(holder) {
  return holder !== null && holder.born !== null && identity(holder.pid) === holder.born
}

function describe(what, children = []) {
  const note = child => ({ pid: child.pid, born: identity(child.pid) })
  return JSON.stringify({ pid: process.pid, born: identity(process.pid), what, children: children.map(note) })
}

/** Writes a file that is never seen half written. Throws EEXIST when `exclusive` and already there. */
function place(file, text, exclusive) {
  const draft = `${file}.${process.pid}`
  writeFileSync(draft, text, { mode: 0o600 })
  if (!exclusive) return renameSync(draft, file)
  try {
    linkSync(draft, file)
  }
  finally {
    rmSync(draft)
  }
}

/**
 * Takes a lock. One left by a killed run is cleared, and the children it left running are ended.
 * @param {string} file
 * @param {string} what the holder, for people
 * @returns {Promise<{ held: false, holder: Holder } | { held: true, leftover: boolean, release: () => void }>}
 */
export async function takeLock(file, what) {
  mkdirSync(dirname(file), { recursive: true })
  let leftover = false
  for (;;) {
    try {
      place(file, describe(what), true)
      break
    }
    catch (error) {
      if (error.code !== 'EEXIST') throw error
    }
    const holder = readHolder(file)
    if (isAlive(holder)) return { held: false, holder }
    leftover = true
    await clear(file)
  }
  const unwatch = watchChildren(children => place(file, describe(what, children), false))
  return {
    held: true,
    leftover,
    release() {
      unwatch()
      rmSync(file, { force: true })
    },
  }
}

/** Moves a dead holder's lock away first, so that of two who find it only one clears it. */
async function clear(file) {
  const aside = `${file}.${process.pid}.old`
  try {
    renameSync(file, aside)
  }
  catch (error) {
    if (error.code === 'ENOENT') return
    throw error
  }
  const holder = readHolder(aside)
  if (isAlive(holder)) {
    renameSync(aside, file)
    return
  }
  for (const child of holder?.children ?? []) {
    if (isAlive(child)) await endTree(child.pid, 1200)
  }
  rmSync(aside)
}

/**
 * Does something while holding a lock, waiting for it as long as its holder lives.
 * @template T
 * @param {string} file
 * @param {string} what
 * @param {() => Promise<T>} work
 * @returns {Promise<T>}
 */
export async function withLock(file, what, work) {
  let lock = await takeLock(file, what)
  while (!lock.held) {
    await sleep(100)
    lock = await takeLock(file, what)
  }
  try {
    return await work()
  }
  finally {
    lock.release()
  }
}
