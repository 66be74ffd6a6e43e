import { spawn } from 'node:child_process'
import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { scrub } from '../../../scripts/lib/environment.mjs'
import { endTree, identity, must, run, start } from '../../../scripts/lib/process.mjs'
import { library, runModule, temporaryFolder } from './helpers'

const FOREVER = 'setInterval(() => {}, 1000)'

describe('run', () => {
  it('gathers what a program prints, apart by kind, with its exit code', async () => {
    const text = 'process.stdin.pipe(process.stdout); console.error("bad"); process.exitCode = 3'
    expect(await run(process.execPath, ['-e', text], { capture: true, input: 'good' })).toEqual({ code: 3, output: 'good', errors: 'bad\n' })
  })

  it('answers 127 for a program that is not there', async () => {
    expect(await run('/nowhere/at-all', [], { capture: true })).toMatchObject({ code: 127 })
  })
})

describe('must', () => {
  it('stops with the sentence and the program\'s last words', async () => {
    await expect(must('It failed:', process.execPath, ['-e', 'console.error("why"); process.exit(1)'], { capture: true }))
      .rejects.toThrow('It failed:\n  why')
  })
})

describe('identity', () => {
  it('is the same for as long as a process lives and null afterwards', async () => {
    const child = start(process.execPath, ['-e', FOREVER])
    const pid = child.pid ?? 0
    const born = identity(pid)
    expect(born).not.toBeNull()
    expect(identity(pid)).toBe(born)
    await endTree(pid, 1000)
    expect(identity(pid)).toBeNull()
  })
})

describe('endTree', () => {
  it('ends by force what does not end by itself, with its children', async () => {
    const text = `
      const child = require('child_process').spawn(process.execPath, ['-e', '${FOREVER}'])
      process.on('SIGTERM', () => {})
      console.log(child.pid)
      ${FOREVER}
    `
    const stubborn = start(process.execPath, ['-e', text], { stdio: ['ignore', 'pipe', 'ignore'] })
    const grandchild = await new Promise<number>(done => stubborn.stdout?.once('data', (data: Buffer) => done(Number(data.toString()))))
    expect(identity(grandchild)).not.toBeNull()
    await endTree(stubborn.pid ?? 0, 100)
    expect(identity(stubborn.pid ?? 0)).toBeNull()
    await expect.poll(() => identity(grandchild)).toBeNull()
  })
})

describe('main', () => {
  const program = (work: string) => `
    import { Stop, atEnd, main, say, start } from '${library('process')}'
    await main(async () => { ${work} })
  `

  it.each(['SIGTERM', 'SIGINT', 'SIGHUP'] as const)('ends children, then what they stood on, within three seconds of %s', async (signal) => {
    const work = `
      atEnd(() => say('first closer'))
      atEnd(() => say('second closer'))
      const child = start(process.execPath, ['-e', 'process.on("SIGTERM", () => { console.log("child ends"); process.exit() }); console.log(process.pid); ${FOREVER}'])
      await child.ended
      await new Promise(() => {})
    `
    const running = runModule(program(work))
    const child = Number(await running.firstLine)
    const began = performance.now()
    running.child.kill(signal)
    const { code, output } = await running.ended
    expect(performance.now() - began).toBeLessThan(3000)
    expect(code).toBe(0)
    expect(output).toBe(`${child}\nchild ends\nsecond closer\nfirst closer\n`)
    expect(identity(child)).toBeNull()
  })

  it('ends when the shell that npm puts in between is ended, which tells nobody', async () => {
    const folder = temporaryFolder()
    const file = join(folder, 'program.mjs')
    writeFileSync(file, program(`atEnd(() => say('ended')); say(process.pid); ${FOREVER}; await new Promise(() => {})`))
    const shell = spawn('sh', ['-c', `"${process.execPath}" "${file}"; true`], {
      env: { ...scrub(process.env), npm_lifecycle_event: 'start' }, stdio: ['ignore', 'pipe', 'inherit'],
    })
    let output = ''
    const closed = new Promise(done => shell.stdout.once('close', done))
    const up = new Promise(done => shell.stdout.once('data', done))
    shell.stdout.on('data', (text: Buffer) => {
      output += text.toString()
    })
    await up
    shell.kill('SIGTERM')
    // The output closes once the last process that holds it is gone.
    await closed
    expect(output).toMatch(/^\d+\nended\n$/)
  })

  it('prints a stop as one sentence without a stack and ends with 1', async () => {
    expect(await runModule(program('throw new Stop("No.")')).ended).toEqual({ code: 1, output: 'No.\n' })
  })

  it('prints an unexpected error with its stack and ends with 1', async () => {
    const { code, output } = await runModule(program('throw new TypeError("odd")')).ended
    expect(code).toBe(1)
    expect(output).toMatch(/^TypeError: odd\n\s+at /)
  })
})
