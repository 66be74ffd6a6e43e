import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { checkSum, conclude, failedSum, sumReport } from '../../../scripts/lib/report.mjs'
import { temporaryFolder } from './helpers'

interface Test { status: string, fullName: string, failureMessages: string[] }

const test = (status: string, fullName = 'a test'): Test => ({ status, fullName, failureMessages: [] })
const file = (assertionResults: Test[], status = 'passed', message = '') => ({ name: 'a.test.ts', status, message, assertionResults })

function sum(report: unknown, code = 0) {
  const path = join(temporaryFolder(), 'report.json')
  writeFileSync(path, typeof report === 'string' ? report : JSON.stringify(report))
  return sumReport('unit', path, code)
}

describe('sumReport', () => {
  it('counts what passed', () => {
    expect(sum({ success: true, testResults: [file([test('passed'), test('passed')]), file([test('passed')])] }))
      .toEqual({ name: 'unit', passed: 3, failed: 0, problems: [] })
  })

  it('names what failed, with the first lines of its message', () => {
    const failed = { ...test('failed', 'the pot rings'), failureMessages: ['expected 1\nto be 2'] }
    const { passed, failed: count, problems } = sum({ success: false, testResults: [file([test('passed'), failed], 'failed')] }, 1)
    expect({ passed, count }).toEqual({ passed: 1, count: 1 })
    expect(problems[0]).toContain('a.test.ts: the pot rings (failed)')
    expect(problems[0]).toContain('to be 2')
  })

  it.each(['skipped', 'pending', 'todo', 'disabled'])('counts a %s test as failed', (status) => {
    expect(sum({ success: true, testResults: [file([test('passed'), test(status)])] })).toMatchObject({ passed: 1, failed: 1 })
  })

  it('fails when there is no report', () => {
    expect(sumReport('unit', join(temporaryFolder(), 'none.json'), 0)).toMatchObject({ passed: 0, failed: 1, problems: ['unit: wrote no report'] })
  })

  it('fails when the report was cut off', () => {
    expect(sum('{"testResults": [')).toMatchObject({ passed: 0, failed: 1 })
  })

  it.each([[{}], [{ success: true, testResults: [] }]])('fails when no test ran: %j', (report) => {
    expect(sum(report)).toMatchObject({ passed: 0, failed: 1, problems: ['unit: ran no test'] })
  })

  it('fails a file without tests and says why', () => {
    const { failed, problems } = sum({ success: false, testResults: [file([test('passed')]), file([], 'failed', 'Cannot find module x')] }, 1)
    expect(failed).toBe(1)
    expect(problems[0]).toContain('Cannot find module x')
  })

  it('fails a file that failed outside of its tests', () => {
    expect(sum({ success: false, testResults: [file([test('passed')], 'failed', 'afterAll threw')] }, 1)).toMatchObject({ passed: 1, failed: 1 })
  })

  it('fails a run that ended badly though all tests passed', () => {
    expect(sum({ success: true, testResults: [file([test('passed')])] }, 1)).toMatchObject({ passed: 1, failed: 1 })
  })
})

describe('conclude', () => {
  const good = checkSum('lint', true, '')

  it('ends in the figures and with 0', () => {
    const { lines, code } = conclude([good, { name: 'unit', passed: 41, failed: 0, problems: [] }])
    expect(lines.at(-1)).toBe('42 passed, 0 failed')
    expect(code).toBe(0)
  })

  it('ends with 1 after any failure and prints it', () => {
    const { lines, code } = conclude([good, checkSum('types', false, 'a.ts(1,1): error'), failedSum('e2e', 'ran no test')])
    expect(lines.at(-1)).toBe('1 passed, 2 failed')
    expect(lines.join('\n')).toContain('a.ts(1,1): error')
    expect(code).toBe(1)
  })

  it('ends with 1 when nothing ran at all', () => {
    expect(conclude([])).toMatchObject({ code: 1 })
  })
})
