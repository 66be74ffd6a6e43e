import { listHazardStatements } from '../../repositories/materials'
import { defineRoute } from '../../utils/handler'

export default defineRoute({
  permission: 'materials:read',
  async handle({ ctx }) {
    return { items: await listHazardStatements(ctx.db), nextCursor: null }
  },
})
