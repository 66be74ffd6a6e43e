import { join } from 'node:path'
import { isTaken, takenSentence } from './lib/net.mjs'
import { dataFolder, root } from './lib/paths.mjs'
import { Stop, main, run, say } from './lib/process.mjs'
import { checkNode, readSettings } from './lib/settings.mjs'
import { checkEnvironment, claimFolder, fillShop, openShop, welcome } from './lib/shop.mjs'

await main(async () => {
  checkNode()
  const settings = readSettings(process.env)
  await claimFolder(dataFolder(process.env), 'npm run dev')
  if (await isTaken(settings.port, settings.host)) throw new Stop(takenSentence(settings.port, settings.host))
  await checkEnvironment(process.env)
  const shop = await openShop(process.env, settings)
  const status = await fillShop(shop, settings)
  say(welcome(`http://${settings.host}:${settings.port} (soon)`, status).join('\n'))
  const sessionSecret = shop.env.SESSION_SECRET || shop.secrets.sessionSecret
  const { code } = await run(process.execPath, [
    join(root, 'node_modules', 'nuxt', 'bin', 'nuxt.mjs'), 'dev', '--port', String(settings.port), '--host', settings.host, '--no-fork',
  ], {
    cwd: root,
    env: {
      ...shop.env,
      SESSION_SECRET: sessionSecret,
      NUXT_SESSION_PASSWORD: sessionSecret,
      NUXT_TELEMETRY_DISABLED: '1',
      POTBELL_DATA_DIR: shop.folder,
      HOST: settings.host,
      PORT: String(settings.port),
    },
  })
  return code
})
