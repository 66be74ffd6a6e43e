import { findUnused, lint, prepareTypes, typecheck } from './lib/checks.mjs'
import { scrub } from './lib/environment.mjs'
import { ensurePackages } from './lib/packages.mjs'
import { root } from './lib/paths.mjs'
import { main, say } from './lib/process.mjs'
import { checkNode } from './lib/settings.mjs'

/** Every check runs, also after one has failed. */
await main(async () => {
  checkNode()
  const env = scrub(process.env)
  await ensurePackages(root, env)
  await prepareTypes(env)
  let failed = 0
  for (const [name, ask] of [['lint', lint], ['types', typecheck], ['unused code', findUnused]]) {
    const { passed, output } = await ask(env)
    say(`${name}: ${passed ? 'fine' : 'failed'}`)
    if (!passed) say(output.trimEnd())
    failed += passed ? 0 : 1
  }
  return failed === 0 ? 0 : 1
}, { interrupted: 130 })
