import { readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { defineNuxtModule } from '@nuxt/kit'

/** As much of a built file as is needed here. */
interface BuiltFile {
  file: string
  src?: string
  isEntry?: boolean
  css?: string[]
  assets?: string[]
  imports?: string[]
  dynamicImports?: string[]
}

/** What the bench opens by itself: parts of its steps, dialogs, its frame and what they fetch late. Pages are not among them. */
const wanted = /^(?:components\/(?:base|bench|cup|label|time)\/|layouts\/bench\.vue|shared\/|utils\/|error\.vue)/
const step = 'components/bench/BenchStir.vue'

/** Writes the bench's service worker with the list of this build's files that the bench is made of. */
export default defineNuxtModule({
  meta: { name: 'bench-worker' },
  setup(_, nuxt) {
    let files: string[] = []
    nuxt.hook('build:manifest', (manifest) => { files = benchFiles(manifest as Record<string, BuiltFile>) })
    nuxt.hook('nitro:build:public-assets', (nitro) => {
      const { buildId } = nuxt.options
      const base = nuxt.options.app.buildAssetsDir
      const list = [...files.map(file => join('/', base, file)), join('/', base, 'builds/meta', `${buildId}.json`), join('/', base, 'builds/latest.json'), '/favicon.svg']
      const source = readFileSync(join(nuxt.options.rootDir, 'assets/bench-worker.js'), 'utf8')
      const worker = source.replace('\'__FILES__\'', list.map(file => JSON.stringify(file)).join(', ')).replace('__BUILD__', buildId)
      writeFileSync(join(nitro.options.output.publicDir, 'bench-worker.js'), worker)
    })
  },
})

/**
 * The entry and the bench's page with all that they import, and what the page opens later. The page itself goes by the
 * name of its chunk: it is what fetches the first step.
 */
export function benchFiles(manifest: Readonly<Record<string, BuiltFile>>): string[] {
  const found = new Set<string>()
  const seen = new Set<string>()

  function walk(key: string): void {
    const built = manifest[key]
    if (built === undefined || seen.has(key)) return
    seen.add(key)
    for (const file of [built.file, ...built.css ?? [], ...built.assets ?? []]) found.add(file)
    for (const next of built.imports ?? []) walk(next)
    for (const next of built.dynamicImports ?? []) if (wanted.test(manifest[next]?.src ?? next)) walk(next)
  }

  for (const [key, { isEntry, src, dynamicImports }] of Object.entries(manifest)) {
    if (isEntry || dynamicImports?.includes(step) || (src !== undefined && wanted.test(src))) walk(key)
  }
  if (!seen.has(step)) throw new Error(`the build holds no ${step}: the bench's page is not found by it`)
  return [...found].filter(file => file !== '').sort()
}
