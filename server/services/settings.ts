import type { Settings, SettingsPatchBody } from '#shared/schemas/settings'
import { readSettings, writeSettings } from '../repositories/settings'
import { versionConflict } from '../utils/conflict'
import type { Context } from '../utils/context'
import { invalid } from '../utils/errors'
import { mutate } from '../utils/transactions'

/** Codes of ISO 4217 that this server's own tables know, past ones too. */
const currencies = new Set(Intl.supportedValuesOf('currency'))

/**
 * Changes what holds for the whole shop.
 *
 * @throws Refusal 400 for a currency that is none, 409 `version-conflict` with what stands now
 */
export function changeSettings(ctx: Context, { version, name, zone, currency }: SettingsPatchBody): Promise<Settings> {
  return mutate(ctx, async ({ trx, now, audit, publish }) => {
    const before = await readSettings(trx, { hold: true })
    if (before.version !== version) throw await versionConflict(before, 'settings:shop', trx)
    if (typeof currency === 'string' && !currencies.has(currency)) {
      throw invalid([{ path: 'currency', message: 'There is no such currency code.' }])
    }
    const after = { ...before, name: name ?? before.name, zone: zone ?? before.zone, currency: currency === undefined ? before.currency : currency }
    await writeSettings(after, now, trx)
    audit({
      action: 'settings.changed', subject: 'settings:shop',
      facts: { renamed: before.name !== after.name, from: { zone: before.zone, currency: before.currency }, to: { zone: after.zone, currency: after.currency } },
    })
    publish({ type: 'shop', subject: 'settings:shop', boothId: null, payload: { id: 'shop' } })
    return readSettings(trx)
  })
}
