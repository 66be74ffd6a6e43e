import { useApp } from '../utils/app'

/** One line a request, without query strings, cookies or bodies. */
export default defineNitroPlugin((nitro) => {
  nitro.hooks.hook('request', (event) => {
    event.context.startedAt = process.hrtime.bigint()
  })
  nitro.hooks.hook('afterResponse', (event) => {
    const { requestId, startedAt, principal } = event.context
    if (!requestId || !startedAt) return
    useApp().log.info({
      requestId,
      method: event.method,
      path: event.path.split('?')[0],
      status: event.node.res.statusCode,
      ms: Number((process.hrtime.bigint() - startedAt) / 1_000_000n),
      principal: principal?.kind,
    }, 'request')
  })
})
