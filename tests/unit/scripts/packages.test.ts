import { mkdirSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { packagesMatch } from '../../../scripts/lib/packages.mjs'
import { temporaryFolder } from './helpers'

const one = { version: '1.0.0', integrity: 'sha512-one' }
const elsewhere = { version: '2.0.0', integrity: 'sha512-two', optional: true }
const wanted = { '': { version: '0.1.0' }, 'node_modules/one': one, 'node_modules/elsewhere': elsewhere }

function folderWith(installed: object | undefined): string {
  const folder = temporaryFolder()
  mkdirSync(join(folder, 'node_modules'))
  writeFileSync(join(folder, 'package-lock.json'), JSON.stringify({ packages: wanted }))
  if (installed) writeFileSync(join(folder, 'node_modules', '.package-lock.json'), JSON.stringify({ packages: installed }))
  return folder
}

describe('packagesMatch', () => {
  it('accepts what the lock file asks for, without the packages of other machines', () => {
    expect(packagesMatch(folderWith({ 'node_modules/one': one }))).toBe(true)
  })

  it.each([
    ['an installation that was cut off', undefined],
    ['a missing package', {}],
    ['another version', { 'node_modules/one': { ...one, version: '1.0.1' } }],
    ['other contents', { 'node_modules/one': { ...one, integrity: 'sha512-other' } }],
    ['another version of an optional package', { 'node_modules/one': one, 'node_modules/elsewhere': { ...elsewhere, version: '2.1.0' } }],
  ])('asks for an installation after %s', (_, installed) => {
    expect(packagesMatch(folderWith(installed))).toBe(false)
  })
})
