import { version } from '../../package.json'
import { describeApi } from '../utils/openapi'
import { apiRoutes } from '../utils/openapi-routes'

export default defineRoute({
  permission: 'public',
  handle: () => describeApi(apiRoutes, version),
})
