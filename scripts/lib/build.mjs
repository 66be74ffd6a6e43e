import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { buildEnvironment } from './environment.mjs'
import { hashSources } from './hash.mjs'
import { isAlive, readHolder, withLock } from './lock.mjs'
import { root } from './paths.mjs'
import { Stop, identity, must, say } from './process.mjs'

const output = join(root, '.output')
const mark = join(output, 'sources.sha256')
const users = join(output, 'used-by')

/** The server that a build ends in. */
export const serverEntry = join(output, 'server', 'index.mjs')

/**
 * Whether the build is made from these sources.
 * @param {string} hash
 */
function isCurrent(hash) {
  return existsSync(serverEntry) && existsSync(mark) && readFileSync(mark, 'utf8') === hash
}

/** Processes that serve from the present build; to replace it would take their files from under them. */
function usersOfBuild() {
  if (!existsSync(users)) return []
  return readdirSync(users).map(name => readHolder(join(users, name))).filter(isAlive)
}

/** Notes that this process serves from the present build. Ends with the process. */
export function useBuild() {
  mkdirSync(users, { recursive: true })
  const note = { pid: process.pid, born: identity(process.pid), what: 'serving', children: [] }
  writeFileSync(join(users, String(process.pid)), JSON.stringify(note))
}

/**
 * Builds when the present build is not made from the present sources.
 * @param {Record<string, string | undefined>} env
 */
export async function ensureBuild(env) {
  await withLock(join(root, '.data', 'build.lock'), 'build', async () => {
    const hash = hashSources(root)
    if (isCurrent(hash)) return
    const [user] = usersOfBuild()
    if (user) throw new Stop(`The sources have changed and process ${user.pid} still serves the build made before: end that one first.`)
    say('Building (about a minute) …')
    rmSync(mark, { force: true })
    await must('The build failed:', process.execPath, [join(root, 'node_modules', 'nuxt', 'bin', 'nuxt.mjs'), 'build'], {
      cwd: root, env: buildEnvironment(env), capture: true,
    })
    // Whoever saves a file during the build gets another build next time.
    writeFileSync(mark, hash)
  })
}
