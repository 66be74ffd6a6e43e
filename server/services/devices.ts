import type { Device, DeviceCreateBody } from '#shared/schemas/devices'
import { getDevice, insertDevice, isActive, revokeDevice } from '../repositories/devices'
import type { Context } from '../utils/context'
import { invalid, notFound, type FieldFault } from '../utils/errors'
import { sha256 } from '../utils/hash'
import { newId } from '../utils/ids'
import { mutate } from '../utils/transactions'

/**
 * Enrols the asking browser; what it was before, it is no more. Only the token's hash is stored; the token itself goes
 * into a cookie and nowhere else, so the caller makes it and hands it in.
 *
 * @throws Refusal 400 when a screen has no booth, or a booth or scale that is named is not there
 */
export function enrolDevice(ctx: Context, body: DeviceCreateBody, token: string): Promise<Device> {
  return mutate(ctx, async ({ trx, now, audit, publish }) => {
    const faults: FieldFault[] = []
    if (body.kind === 'screen' && !body.boothId) faults.push({ path: 'boothId', message: 'A screen belongs to a booth.' })
    if (body.boothId && !(await isActive('booths', body.boothId, trx))) faults.push({ path: 'boothId', message: 'There is no such booth.' })
    if (body.scaleId && !(await isActive('scales', body.scaleId, trx))) faults.push({ path: 'scaleId', message: 'There is no such scale.' })
    if (faults.length > 0) throw invalid(faults)
    const id = newId()
    const replaced = ctx.principal.device?.id ?? null
    if (replaced !== null && (await revokeDevice(replaced, now, trx)) > 0) {
      publish({ type: 'device-ended', subject: `device:${replaced}`, boothId: null, payload: { id: replaced } })
    }
    await insertDevice(id, body, sha256(token), now, trx)
    const { kind, boothId, scaleId } = body
    audit({ action: 'device.enrolled', subject: `device:${id}`, facts: { kind, boothId, scaleId, replaced } })
    publish({ type: 'device', subject: `device:${id}`, boothId: body.boothId, payload: { id } })
    const device = await getDevice(id, trx)
    if (!device) throw notFound('The device')
    return device
  })
}

/**
 * Takes a device's right away at once; its streams are closed.
 *
 * @throws Refusal 404 when it is unknown or already revoked
 */
export async function removeDevice(ctx: Context, id: string): Promise<void> {
  await mutate(ctx, async ({ trx, now, audit, publish }) => {
    if ((await revokeDevice(id, now, trx)) === 0) throw notFound('The device')
    audit({ action: 'device.revoked', subject: `device:${id}`, facts: {} })
    publish({ type: 'device-ended', subject: `device:${id}`, boothId: null, payload: { id } })
    return null
  })
}
