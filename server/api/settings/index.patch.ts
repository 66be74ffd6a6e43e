import { SettingsPatchBody } from '#shared/schemas/settings'
import { changeSettings } from '../../services/settings'

export default defineRoute({
  permission: 'settings:write',
  body: SettingsPatchBody,
  handle: ({ ctx, body }) => changeSettings(ctx, body),
})
