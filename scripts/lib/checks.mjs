import { join } from 'node:path'
import { root } from './paths.mjs'
import { must, run } from './process.mjs'

const program = (...path) => join(root, 'node_modules', ...path)
const nuxt = program('nuxt', 'bin', 'nuxt.mjs')

/** Runs a tool of the project and answers whether it was content. */
async function ask(env, ...args) {
  const { code, output, errors } = await run(process.execPath, args, {
    cwd: root, env: { ...env, NUXT_TELEMETRY_DISABLED: '1' }, capture: true,
  })
  return { passed: code === 0, output: `${output}${errors}` }
}

/** Writes the generated types and the linter's base, which every other check reads. */
export async function prepareTypes(env) {
  await must('The types could not be generated:', process.execPath, [nuxt, 'prepare'], {
    cwd: root, env: { ...env, NUXT_TELEMETRY_DISABLED: '1' }, capture: true,
  })
}

export const lint = env => ask(env, program('eslint', 'bin', 'eslint.js'), '--max-warnings=0', '.')
export const typecheck = env => ask(env, nuxt, 'typecheck')
export const findUnused = env => ask(env, program('knip', 'bin', 'knip.js'))
