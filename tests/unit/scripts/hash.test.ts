import { mkdirSync, renameSync, utimesSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { hashSources } from '../../../scripts/lib/hash.mjs'
import { temporaryFolder } from './helpers'

function project(): string {
  const folder = temporaryFolder()
  mkdirSync(join(folder, 'server'))
  mkdirSync(join(folder, 'tests'))
  mkdirSync(join(folder, '.data'))
  writeFileSync(join(folder, 'package-lock.json'), '{"lockfileVersion":3}')
  writeFileSync(join(folder, 'app.vue'), '<template><p>one</p></template>')
  writeFileSync(join(folder, 'server', 'a.ts'), 'export const a = 1')
  return folder
}

describe('hashSources', () => {
  it('stays the same when only times change', () => {
    const folder = project()
    const before = hashSources(folder)
    utimesSync(join(folder, 'app.vue'), new Date(0), new Date(0))
    expect(hashSources(folder)).toBe(before)
  })

  it.each([
    ['a source', (folder: string) => writeFileSync(join(folder, 'app.vue'), '<template><p>two</p></template>')],
    ['a source in a folder', (folder: string) => writeFileSync(join(folder, 'server', 'a.ts'), 'export const a = 2')],
    ['the lock file', (folder: string) => writeFileSync(join(folder, 'package-lock.json'), '{"lockfileVersion":2}')],
    ['a new file', (folder: string) => writeFileSync(join(folder, 'server', 'b.ts'), '')],
    ['a name', (folder: string) => renameSync(join(folder, 'server', 'a.ts'), join(folder, 'server', 'c.ts'))],
  ])('changes with %s', (_, change) => {
    const folder = project()
    const before = hashSources(folder)
    change(folder)
    expect(hashSources(folder)).not.toBe(before)
  })

  it.each([['tests', 'a.test.ts'], ['.data', 'secrets.json'], ['.', 'README.md'], ['.', 'vitest.config.ts']])(
    'does not change with %s/%s, which no build contains', (where, name) => {
      const folder = project()
      const before = hashSources(folder)
      writeFileSync(join(folder, where, name), 'x')
      expect(hashSources(folder)).toBe(before)
    })

  it('changes with Node\'s version', () => {
    const folder = project()
    expect(hashSources(folder, 'v20.19.0')).not.toBe(hashSources(folder, 'v20.20.2'))
  })

  it('tells apart files whose names and contents run together alike', () => {
    const one = temporaryFolder()
    const other = temporaryFolder()
    writeFileSync(join(one, 'ab'), 'c')
    writeFileSync(join(other, 'a'), 'bc')
    expect(hashSources(one)).not.toBe(hashSources(other))
  })
})
