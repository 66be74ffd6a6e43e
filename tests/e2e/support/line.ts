import { connect, createServer, type AddressInfo, type Socket } from 'node:net'
import { baseUrl } from './browser'

/** A network line between a browser and the server that a test can cut: open streams die and nothing gets through. */
export interface Line {
  /** Address of this end of the line. */
  url: string
  cut(): void
  mend(): void
  close(): Promise<void>
}

export async function openLine(): Promise<Line> {
  const target = new URL(baseUrl)
  const sockets = new Set<Socket>()
  let whole = true
  const server = createServer((near) => {
    if (!whole) return void near.destroy()
    const far = connect(Number(target.port), target.hostname)
    for (const socket of [near, far]) {
      sockets.add(socket)
      socket.on('close', () => sockets.delete(socket))
      // A cut line ends both sides with an error that is what was asked for.
      socket.on('error', () => socket.destroy())
    }
    near.pipe(far).pipe(near)
    near.on('close', () => far.destroy())
    far.on('close', () => near.destroy())
  })
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const cut = () => {
    whole = false
    for (const socket of sockets) socket.destroy()
  }
  return {
    url: `http://127.0.0.1:${(server.address() as AddressInfo).port}`,
    cut,
    mend: () => void (whole = true),
    close: () => {
      cut()
      return new Promise((resolve) => void server.close(() => resolve()))
    },
  }
}
