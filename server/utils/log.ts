import pino, { type Logger } from 'pino'

/** JSON lines on standard output. Nothing that identifies a person or opens a door is ever written. */
export function createLog(level: string): Logger {
  return pino({
    level,
    base: undefined,
    timestamp: pino.stdTimeFunctions.isoTime,
    redact: { paths: ['password', '*.password', 'token', '*.token', 'headers.cookie', 'headers.authorization', 'err.sql', 'err.config'], remove: true },
    serializers: { err: describeError },
  })
}

/** What helps to find the fault. A failed query's text holds its values, so only its number is kept. */
function describeError(error: unknown) {
  if (!(error instanceof Error)) return { message: String(error) }
  const errno = 'errno' in error ? error.errno : undefined
  const message = 'sql' in error ? `database error ${String(errno)}` : error.message
  return { type: error.name, message, errno, stack: error.stack?.split('\n').slice(1).join('\n') }
}
