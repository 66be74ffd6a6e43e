import { listPeople } from '../../services/people'

export default defineRoute({
  permission: 'people:read',
  handle: ({ ctx }) => listPeople(ctx),
})
