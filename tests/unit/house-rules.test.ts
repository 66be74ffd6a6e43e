import { readdirSync, readFileSync } from 'node:fs'
import { join, relative } from 'node:path'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'
import { tables } from '../../server/database/tables'

const root = fileURLToPath(new URL('../..', import.meta.url))

function filesIn(folder: string, ending: RegExp): string[] {
  return readdirSync(join(root, folder), { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && ending.test(entry.name))
    .map((entry) => relative(root, join(entry.parentPath, entry.name)))
}

const read = (file: string) => readFileSync(join(root, file), 'utf8')
const codeOf = (file: string) => read(file).replace(/\/\*[\s\S]*?\*\/|(?<=^|\s)\/\/.*$/gm, '')
const offenders = (files: string[], pattern: RegExp) => files.filter((file) => pattern.test(read(file)))

const routes = filesIn('server/api', /\.ts$/).filter((file) => !file.endsWith('[...].ts'))
const services = [...filesIn('server/services', /\.ts$/), ...filesIn('server/repositories', /\.ts$/), ...filesIn('server/live', /\.ts$/)]
const browser = [...filesIn('pages', /\.vue$/), ...filesIn('components', /\.vue$/), ...filesIn('stores', /\.ts$/), ...filesIn('composables', /\.ts$/), ...filesIn('layouts', /\.vue$/)]
const migrations = filesIn('migrations', /./)

describe('routes', () => {
  it('carry their method in their file name', () => {
    expect(routes.filter((file) => !/\.(get|post|put|patch|delete)\.ts$/.test(file))).toEqual([])
  })

  it('are made by defineRoute alone, which does not answer without a permission', () => {
    expect(routes.filter((file) => !/defineRoute\(\{\s*(\/\/.*\s*)?permission: '/.test(read(file)))).toEqual([])
  })

  it('are a paragraph: no more than 60 lines', () => {
    expect(routes.filter((file) => read(file).split('\n').length > 60)).toEqual([])
  })

  it('hold no SQL and no Knex', () => {
    expect(offenders(routes, /from 'knex'|\.raw\(|\btrx\b|ctx\.db\(/)).toEqual([])
  })
})

describe('services and repositories', () => {
  it('run without Nitro', () => {
    expect(offenders(services, /from '(h3|nitropack|#imports|#app)[/']/)).toEqual([])
  })

  it('never ask this machine for the time', () => {
    expect(offenders(services, /Date\.now\(\)|new Date\(\)/)).toEqual([])
  })

  it('never count on rows that MariaDB does not return', () => {
    expect(offenders(services, /\.returning\(/)).toEqual([])
  })
})

describe('pages, components, stores and composables', () => {
  it('never touch the database', () => {
    expect(offenders(browser, /from '(knex|mysql2)/)).toEqual([])
  })

  it('keep no state in the module', () => {
    expect(offenders(browser.filter((file) => file.endsWith('.ts')), /^(export )?const \w+ = (ref|reactive|shallowRef)\(/m)).toEqual([])
  })

  it('leave the paths of pages to utils/routes.ts', () => {
    expect(offenders(browser, /(\bto="\/[a-z]|navigateTo\(['"`]\/)/)).toEqual([])
  })

  it('import zod\'s small build only', () => {
    expect(offenders(filesIn('shared', /\.ts$/), /from 'zod'/)).toEqual([])
  })
})

describe('migrations', () => {
  it('are TypeScript with a time, a verb and a name', () => {
    expect(migrations.filter((file) => !/^migrations\/\d{14}_(create|fill|add|change|drop|rename|insert)_[a-z_]+\.ts$/.test(file))).toEqual([])
  })

  it('go back as well as forward', () => {
    const empty = /export async function down\([^)]*\): Promise<void> \{\s*\}/
    expect(migrations.filter((file) => !/export async function down\(/.test(read(file)) || empty.test(read(file)))).toEqual([])
  })

  it('change the schema or the data, never both', () => {
    expect(migrations.filter((file) => /createTable\(|alterTable\(/.test(read(file)) && /\.insert\(|\.update\(/.test(read(file)))).toEqual([])
  })

  it('create no table that the grants do not know', () => {
    const created = migrations.flatMap((file) => [...read(file).matchAll(/createTable\(knex, '(\w+)'/g)].map((match) => match[1] ?? ''))
    const known = new Set<string>(Object.values(tables).flat())
    expect(created.filter((table) => !known.has(table))).toEqual([])
    expect([...known].filter((table) => table !== 'knex_migrations' && !created.includes(table))).toEqual([])
  })
})

describe('the tree', () => {
  const code = ['components', 'composables', 'layouts', 'middleware', 'pages', 'plugins', 'server', 'shared', 'stores', 'utils'].flatMap((folder) => filesIn(folder, /\.(ts|vue)$/))

  it('has no file above 400 lines', () => {
    expect(code.filter((file) => read(file).split('\n').length > 400)).toEqual([])
  })

  it('has no any and no unfinished work', () => {
    expect(code.filter((file) => /: any\b|as any\b|<any>/.test(codeOf(file)))).toEqual([])
    expect(offenders(code, /\bTODO\b|\bFIXME\b/)).toEqual([])
  })
})
