import { describe, expect, it } from 'vitest'
import { buildEnvironment, scrub, serverEnvironment } from '../../../scripts/lib/environment.mjs'

const LIVE = {
  DATABASE_URL: 'mysql://a:b@db/live', DATABASE_ADMIN_URL: 'mysql://c:d@db/live', SMTP_URL: 'smtp://mail', REDIS_URL: 'redis://r',
  S3_BUCKET: 'live', S3_ENDPOINT: 'https://s3', PUBLIC_URL: 'https://live', NUXT_SESSION_PASSWORD: 'x', NITRO_PORT: '1',
  NODE_ENV: 'production', NODE_OPTIONS: '--inspect', PORT: '80', HOST: '0.0.0.0', SESSION_SECRET: 'y', POTBELL_DATA_DIR: '/live', POTBELL_DEMO: '0',
  TZ: 'Asia/Tokyo',
}
const NEEDED = {
  PATH: '/usr/bin', HOME: '/home/x', CI: 'true', LANG: 'C.UTF-8', LC_ALL: 'C', npm_config_cache: '/c', NPM_CONFIG_USERCONFIG: '/rc', https_proxy: 'http://p',
}

describe('scrub', () => {
  it('drops everything of a live shop', () => {
    expect(scrub(LIVE)).toEqual({})
  })

  it('keeps what programs and npm need', () => {
    expect(scrub({ ...LIVE, ...NEEDED })).toEqual(NEEDED)
  })
})

describe('buildEnvironment', () => {
  it('is the same whoever asks for the build', () => {
    expect(buildEnvironment({ ...LIVE, ...NEEDED })).toEqual(buildEnvironment(NEEDED))
  })
})

describe('serverEnvironment', () => {
  const values = { databaseUrl: 'mysql://app:p@127.0.0.1:1/potbell', sessionSecret: 's'.repeat(48), host: '127.0.0.1', port: 4000, dataFolder: '/data' }

  it('never holds the admin\'s way to the database', () => {
    const env = serverEnvironment(LIVE, values)
    expect(Object.values(env)).not.toContain(LIVE.DATABASE_ADMIN_URL)
    expect(env).not.toHaveProperty('DATABASE_ADMIN_URL')
  })

  it('sets address, database and secret over whatever was there', () => {
    expect(serverEnvironment(LIVE, values)).toMatchObject({
      DATABASE_URL: values.databaseUrl, NUXT_SESSION_PASSWORD: values.sessionSecret, PORT: '4000', HOST: '127.0.0.1',
      POTBELL_DATA_DIR: '/data', SMTP_URL: LIVE.SMTP_URL,
    })
  })

  it('leaves no second name for the port', () => {
    expect(serverEnvironment(LIVE, values)).not.toHaveProperty('NITRO_PORT')
  })
})
