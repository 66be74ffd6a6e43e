import { connect, createServer, isIP } from 'node:net'

/**
 * Whether something already listens where we want to.
 * @param {number} port
 * @param {string} host
 * @returns {Promise<boolean>} errors other than "in use" and "not permitted" are thrown
 */
export function isTaken(port, host = '127.0.0.1') {
  return new Promise((done, fail) => {
    const probe = createServer()
    probe.once('error', error => (error.code === 'EADDRINUSE' || error.code === 'EACCES') ? done(true) : fail(error))
    probe.listen({ port, host, exclusive: true }, () => probe.close(() => done(false)))
  })
}

/** A port on loopback that nobody uses now. */
export function freePort() {
  return new Promise((done, fail) => {
    const probe = createServer()
    probe.once('error', fail)
    probe.listen({ port: 0, host: '127.0.0.1' }, () => {
      const { port } = probe.address()
      probe.close(() => done(port))
    })
  })
}

/** The one sentence about a port in use. */
export function takenSentence(port, host) {
  return `Port ${port} on ${host} is taken by another program: end that one, or choose another port, as in PORT=${port === 65535 ? 3001 : port + 1} npm start.`
}

/**
 * Whether a server answers on a socket with a greeting of its own, as a database does once it is ready.
 * @param {string} path of the socket
 * @returns {Promise<boolean>}
 */
export function greets(path) {
  return new Promise((done) => {
    const socket = connect({ path })
    const end = (answer) => {
      socket.destroy()
      done(answer)
    }
    socket.setTimeout(2000, () => end(false))
    socket.once('error', () => end(false))
    socket.once('close', () => end(false))
    socket.once('data', () => end(true))
  })
}

/** `host:port` for an address line, with brackets around IPv6. */
export function address(host, port) {
  return `http://${isIP(host) === 6 ? `[${host}]` : host}:${port}`
}
