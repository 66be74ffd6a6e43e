import { ensureBuild, useBuild } from './lib/build.mjs'
import { serverEnvironment } from './lib/environment.mjs'
import { isTaken, takenSentence } from './lib/net.mjs'
import { dataFolder } from './lib/paths.mjs'
import { Stop, endTree, main, say } from './lib/process.mjs'
import { databaseUrls } from './lib/schema.mjs'
import { serve } from './lib/serve.mjs'
import { checkNode, readSettings } from './lib/settings.mjs'
import { checkEnvironment, claimFolder, fillShop, openShop, welcome } from './lib/shop.mjs'
import { keepDatabase, keepServer } from './lib/supervise.mjs'

/** Serves until it is told to end; the server and the database are started again when they die. */
async function runShop(shop, settings, status) {
  let databaseUrl = shop.env.DATABASE_URL
  let child
  const begin = async () => {
    const env = serverEnvironment(shop.env, {
      databaseUrl,
      sessionSecret: shop.env.SESSION_SECRET || shop.secrets.sessionSecret,
      host: settings.host,
      port: settings.port,
      dataFolder: shop.folder,
    })
    const server = await serve({ env, host: settings.host, port: settings.port })
    child = server.child
    return server
  }
  const moved = async (database) => {
    databaseUrl = databaseUrls(database, shop.secrets, 'potbell').DATABASE_URL
    if (child) await endTree(child.pid, 1000)
  }
  await Promise.all([
    keepServer(begin, url => say(welcome(url, status).join('\n'))),
    shop.database && keepDatabase(shop.database, moved),
  ])
}

await main(async () => {
  checkNode()
  const settings = readSettings(process.env)
  await claimFolder(dataFolder(process.env), 'npm start')
  if (await isTaken(settings.port, settings.host)) throw new Stop(takenSentence(settings.port, settings.host))
  await checkEnvironment(process.env)
  const shop = await openShop(process.env, settings)
  const status = await fillShop(shop, settings)
  await ensureBuild(process.env)
  useBuild()
  await runShop(shop, settings, status)
  return 1
})
