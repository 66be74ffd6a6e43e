import { ConfigError, checkEnvironment } from '../server/utils/config'

/** Says which settings are bad, by name and without their values, and ends with 1. */
try {
  checkEnvironment(process.env)
}
catch (error) {
  if (!(error instanceof ConfigError)) throw error
  process.stderr.write(`${error.message}\n`)
  process.exitCode = 1
}
