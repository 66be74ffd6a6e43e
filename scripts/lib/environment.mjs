/** What a command line, npm and a certificate store need; everything else could change what a test sees. */
const KEPT = new Set([
  'PATH', 'HOME', 'USER', 'LOGNAME', 'SHELL', 'TERM', 'CI', 'LANG', 'LANGUAGE', 'TMPDIR', 'COLUMNS', 'E2E_PICTURES',
  'NO_COLOR', 'FORCE_COLOR', 'HTTP_PROXY', 'HTTPS_PROXY', 'NO_PROXY', 'SSL_CERT_FILE', 'SSL_CERT_DIR', 'NODE_EXTRA_CA_CERTS',
])

const isKept = name => KEPT.has(name) || KEPT.has(name.toUpperCase()) || name.startsWith('LC_') || /^npm_config_/i.test(name)

/**
 * The part of an environment that tests may see: no database, mail, Redis, storage or address of a live shop, no PORT,
 * HOST, NODE_ENV, NODE_OPTIONS or NUXT_*.
 * @param {Record<string, string | undefined>} env
 * @returns {Record<string, string>}
 */
export function scrub(env) {
  return Object.fromEntries(Object.entries(env).filter(([name, value]) => value !== undefined && isKept(name)))
}

/**
 * The environment of a build: the same whoever asks for it, so that one build serves all.
 * @param {Record<string, string | undefined>} env
 */
export function buildEnvironment(env) {
  return { ...scrub(env), NODE_ENV: 'production', NUXT_TELEMETRY_DISABLED: '1' }
}

/**
 * The environment of a server. It never learns how to reach the database as its admin.
 * @param {Record<string, string | undefined>} env what the operator has set
 * @param {{ databaseUrl: string, sessionSecret: string, host: string, port: number, dataFolder: string }} values
 */
export function serverEnvironment(env, { databaseUrl, sessionSecret, host, port, dataFolder }) {
  const own = Object.entries(env).filter(([name]) => name !== 'DATABASE_ADMIN_URL' && !name.startsWith('NITRO_') && !name.startsWith('npm_'))
  return {
    ...Object.fromEntries(own),
    NODE_ENV: 'production',
    DATABASE_URL: databaseUrl,
    SESSION_SECRET: sessionSecret,
    NUXT_SESSION_PASSWORD: sessionSecret,
    HOST: host,
    PORT: String(port),
    POTBELL_DATA_DIR: dataFolder,
  }
}
