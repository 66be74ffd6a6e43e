import { execFileSync, spawn } from 'node:child_process'
import { existsSync, readFileSync } from 'node:fs'
import { setTimeout as sleep } from 'node:timers/promises'

/** An end with a reason for people: its message is printed alone, without a stack. */
export class Stop extends Error {}

/** Children that live now. Each leads a process group of its own, so that its whole tree can be ended. */
const living = new Set()
const closers = []
const watchers = new Set()
let ending

/** Prints one line of progress. */
export function say(line) {
  process.stdout.write(`${line}\n`)
}

/**
 * When a process began, as a text that no other process with the same number shares.
 * @param {number} pid
 * @returns {string | null} null when it does not run (a zombie does not run)
 */
export function identity(pid) {
  if (!Number.isInteger(pid) || pid <= 0) return null
  if (existsSync('/proc/self/stat')) {
    const fields = statFields(pid)
    return fields === null || fields[0] === 'Z' || fields[0] === 'X' ? null : fields[19]
  }
  return askPs(pid, 'lstart=')
}

/** What the system tells about a process, from its state on, or null when it does not run. */
function statFields(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    // The name in brackets may hold spaces and brackets: what counts begins after the last bracket.
    return stat.slice(stat.lastIndexOf(')') + 2).split(' ')
  }
  catch {
    return null
  }
}

/** The process that started this one: npm puts a shell between itself and us. */
function starters() {
  const parent = process.ppid
  const shell = commandLine(parent)?.[1] === '-c' && existsSync('/proc/self/stat')
  return shell ? [parent, Number(statFields(parent)?.[1])] : [parent]
}

/**
 * The command line of a process, or null when it does not run.
 * @param {number} pid
 * @returns {string[] | null}
 */
export function commandLine(pid) {
  if (identity(pid) === null) return null
  if (existsSync('/proc/self/cmdline')) {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0').filter(Boolean)
  }
  return askPs(pid, 'args=')?.split(' ') ?? null
}

function askPs(pid, column) {
  try {
    return execFileSync('ps', ['-o', column, '-p', String(pid)], { encoding: 'utf8' }).trim() || null
  }
  catch {
    return null
  }
}

/** Calls back whenever a child begins or ends, with the children that live. */
export function watchChildren(callback) {
  watchers.add(callback)
  return () => watchers.delete(callback)
}

function changed() {
  for (const watcher of watchers) watcher([...living])
}

/**
 * Starts a program as the leader of its own process group.
 * @param {string} command
 * @param {string[]} args
 * @param {import('node:child_process').SpawnOptions} [options]
 * @returns {import('node:child_process').ChildProcess}
 */
export function start(command, args, options = {}) {
  if (ending) throw new Stop('Ending.')
  const child = spawn(command, args, { stdio: ['ignore', 'inherit', 'inherit'], ...options, detached: true })
  child.ended = new Promise((done) => {
    child.once('error', error => done({ code: 127, error }))
    child.once('exit', (code, signal) => done({ code: code ?? 1, signal }))
  })
  if (child.pid !== undefined) {
    living.add(child)
    changed()
    void child.ended.then(() => {
      living.delete(child)
      changed()
    })
  }
  return child
}

/**
 * Runs a program to its end.
 * @param {string} command
 * @param {string[]} args
 * @param {import('node:child_process').SpawnOptions & { input?: string, capture?: boolean }} [options]
 *   `capture` gathers what it prints instead of showing it; `input` is its standard input
 * @returns {Promise<{ code: number, output: string, errors: string }>}
 */
export async function run(command, args, { input, capture = false, ...options } = {}) {
  const out = capture ? 'pipe' : 'inherit'
  const child = start(command, args, { stdio: [input === undefined ? 'ignore' : 'pipe', out, out], ...options })
  const output = gather(child.stdout)
  const errors = gather(child.stderr)
  // A program that ends before it has read everything breaks the pipe; its exit code tells the story.
  child.stdin?.on('error', () => {}).end(input)
  const closed = capture && child.pid !== undefined ? new Promise(done => child.once('close', done)) : undefined
  const { code, error } = await child.ended
  await closed
  return { code, output: output.text, errors: error ? `${errors.text}${error.message}` : errors.text }
}

function gather(stream) {
  const gathered = { text: '' }
  stream?.setEncoding('utf8').on('data', (text) => {
    gathered.text += text
  })
  return gathered
}

/** As `run`, but a bad end stops everything with the sentence given and, when captured, the last lines printed. */
export async function must(sentence, command, args, options = {}) {
  const { code, output, errors } = await run(command, args, options)
  if (code !== 0) throw new Stop([sentence, ...tail(`${output}${errors}`)].join('\n'))
  return output
}

/** The last lines of a text, indented. */
export function tail(text, lines = 12) {
  return text.trimEnd().split('\n').slice(-lines).filter(Boolean).map(line => `  ${line}`)
}

function signalGroup(pid, signal) {
  try {
    process.kill(-pid, signal)
  }
  catch (error) {
    if (error.code !== 'ESRCH') throw error
  }
}

/**
 * Ends a process and, where it leads a group, the group: politely first, then by force.
 * @param {number} pid
 * @param {number} graceMs how long it may take over its own end
 */
export async function endTree(pid, graceMs) {
  const born = identity(pid)
  if (born === null) return
  signalGroup(pid, 'SIGTERM')
  const until = Date.now() + graceMs
  while (identity(pid) === born && Date.now() < until) await sleep(20)
  // What the leader left behind in its group goes too.
  signalGroup(pid, 'SIGKILL')
  while (identity(pid) === born) await sleep(20)
}

/** Adds something to do at the end, after all children are gone; the last added is done first. */
export function atEnd(closer) {
  closers.push(closer)
}

/** Ends everything that was started here: the children, then what they stood on. */
async function endAll(graceMs = 1200) {
  ending ??= (async () => {
    await Promise.all([...living].map(child => endTree(child.pid, graceMs)))
    for (const closer of closers.reverse()) await closer()
  })()
  await ending
}

/** True once the end has begun: what dies from then on was meant to. */
export function isEnding() {
  return ending !== undefined
}

/**
 * Runs a command's work. A signal or a failure ends all that was started; a second signal ends it by force.
 * @param {() => Promise<number>} work answers the exit code
 * @param {{ interrupted?: number }} [options] the exit code after a signal
 */
export async function main(work, { interrupted = 0 } = {}) {
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
    process.on(signal, () => {
      if (ending) {
        for (const child of living) signalGroup(child.pid, 'SIGKILL')
        process.exit(130)
      }
      void finish(interrupted)
    })
  }
  // A shell that npm puts in between dies of a signal without passing it on.
  if (process.env.npm_lifecycle_event) endWithStarter(() => finish(interrupted))
  let code
  try {
    code = await work()
  }
  catch (error) {
    if (ending) return
    process.stderr.write(`${error instanceof Stop ? error.message : error.stack}\n`)
    code = 1
  }
  if (!ending) await finish(code)
}

function endWithStarter(end) {
  const born = starters().map(pid => ({ pid, is: identity(pid) }))
  const look = setInterval(() => {
    if (ending || born.every(({ pid, is }) => identity(pid) === is)) return
    clearInterval(look)
    void end()
  }, 100)
  look.unref()
}

async function finish(code) {
  try {
    await endAll()
  }
  catch (error) {
    process.stderr.write(`${error.stack}\n`)
    process.exit(1)
  }
  process.exit(code)
}
