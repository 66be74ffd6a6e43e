import { existsSync, readdirSync, writeFileSync } from 'node:fs'
import { availableParallelism } from 'node:os'
import { join } from 'node:path'
import { scrub } from './lib/environment.mjs'
import { ensurePackages } from './lib/packages.mjs'
import { root } from './lib/paths.mjs'
import { main, run, say } from './lib/process.mjs'
import { checkNode } from './lib/settings.mjs'

const folder = join(root, 'tests', 'prove')
const report = join(root, 'docs', 'prove-report.md')

/** Each proof is a program of its own: it prints its figures and ends with 0 when the promise was kept. */
async function prove(name, env) {
  say(`Proving ${name} …`)
  const began = Date.now()
  const { code, output, errors } = await run(process.execPath, [join(folder, name)], { cwd: root, env, capture: true })
  const kept = code === 0
  say(`${name}: ${kept ? 'kept' : 'not kept'}`)
  return { name, kept, seconds: Math.round((Date.now() - began) / 1000), output: `${output}${errors}`.trimEnd() }
}

function write(proofs) {
  const parts = proofs.map(({ name, kept, seconds, output }) =>
    `## ${name.replace(/\.mjs$/, '')}: ${kept ? 'kept' : 'not kept'}\n\n${seconds} s\n\n\`\`\`\n${output}\n\`\`\`\n`)
  const head = `# The long figures\n\nMade by \`npm run prove\` on ${new Date().toISOString().slice(0, 10)}: Node ${process.versions.node}, ${availableParallelism()} cores.\n`
  writeFileSync(report, [head, ...parts].join('\n'))
}

await main(async () => {
  checkNode()
  const names = existsSync(folder) ? readdirSync(folder).filter(name => name.endsWith('.mjs')).sort() : []
  if (names.length === 0) {
    say('There are no long proofs yet: nothing was run and no report was written.')
    return 0
  }
  const env = scrub(process.env)
  await ensurePackages(root, env)
  const proofs = []
  for (const name of names) proofs.push(await prove(name, env))
  write(proofs)
  return proofs.every(proof => proof.kept) ? 0 : 1
}, { interrupted: 130 })
