import { listPeople } from '../../services/people-names'

export default defineRoute({
  permission: 'people:read',
  handle: ({ ctx }) => listPeople(ctx),
})
