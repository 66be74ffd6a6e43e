import { spawn, type ChildProcess } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { onTestFinished } from 'vitest'
import { scrub } from '../../../scripts/lib/environment.mjs'

/** A folder that is gone after the test. */
export function temporaryFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'potbell-unit-'))
  onTestFinished(() => rmSync(folder, { recursive: true, force: true }))
  return folder
}

export const library = (name: string) => new URL(`../../../scripts/lib/${name}.mjs`, import.meta.url).href

export interface Program {
  child: ChildProcess
  pid: number
  /** Settles with the first line printed. */
  firstLine: Promise<string>
  /** Settles at the end. */
  ended: Promise<{ code: number | null, output: string }>
}

/** Runs Node with the arguments in a process of its own; it is ended with the test at the latest. */
export function runNode(args: string[], env: Record<string, string> = {}): Program {
  const child = spawn(process.execPath, args, { env: { ...scrub(process.env), ...env }, stdio: ['ignore', 'pipe', 'pipe'] })
  let output = ''
  const firstLine = new Promise<string>((done) => {
    const add = (text: Buffer) => {
      output += text.toString()
      if (output.includes('\n')) done(output.slice(0, output.indexOf('\n')))
    }
    child.stdout.on('data', add)
    child.stderr.on('data', add)
  })
  const ended = new Promise<{ code: number | null, output: string }>(done => child.once('close', code => done({ code, output })))
  onTestFinished(async () => {
    if (child.exitCode === null && child.signalCode === null) child.kill('SIGKILL')
    await ended
  })
  return { child, pid: child.pid ?? 0, firstLine, ended }
}

/** Runs a module's text as a program. */
export function runModule(text: string, env: Record<string, string> = {}): Program {
  return runNode(['--input-type=module', '-e', text], env)
}
