import { setResponseHeader } from 'h3'
import { BatchExportQuery } from '#shared/schemas/batches'
import { exportBatches } from '../../services/batch-export'
import { useApp } from '../../utils/app'

export default defineRoute({
  permission: 'batches:search',
  query: BatchExportQuery,
  handle: async ({ event, ctx, query }) => {
    const { fileName, stream } = await exportBatches(ctx, query, (error) => useApp().log.error({ err: error }, 'a table broke off'))
    setResponseHeader(event, 'Content-Type', 'text/csv; charset=utf-8; header=present')
    setResponseHeader(event, 'Content-Disposition', `attachment; filename="${fileName}"`)
    event.node.res.once('close', () => stream.destroy())
    return stream
  },
})
