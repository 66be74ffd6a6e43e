import { version } from '../../package.json'
import { describeApi } from '../utils/openapi'
import { apiRoutes } from '../utils/openapi-routes'

/** The same for the life of a process. */
const description = describeApi(apiRoutes, version)

export default defineRoute({
  permission: 'public',
  handle: () => description,
})
