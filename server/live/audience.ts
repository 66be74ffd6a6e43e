import type { Principal } from '../utils/context'
import { forbidden } from '../utils/errors'

/** Whom a snapshot or a stream is for. Null: the whole shop. */
export interface Audience {
  boothId: string | null
}

/**
 * A booth's screen sees its own booth, whatever it asks for; everybody else may choose one booth or all.
 *
 * @throws Refusal 403 when a screen asks for another booth
 */
export function audienceOf(principal: Principal, boothId: string | undefined): Audience {
  const own = principal.kind === 'device' && principal.device.kind === 'screen' ? principal.device.boothId : null
  if (own !== null && boothId !== undefined && boothId !== own) throw forbidden('This screen belongs to another booth.')
  return { boothId: own ?? boothId ?? null }
}

/** What decides whether an event is for an audience. */
export interface Addressed {
  type: string
  boothId: string | null
  payloadJson: string
}

/**
 * True for events of the audience's booth, for those of no booth, and for pots of any booth whose life is up: those
 * alarms hang on every screen of the shop.
 */
export function concerns({ boothId }: Audience, event: Addressed): boolean {
  if (boothId === null || event.boothId === null || event.boothId === boothId) return true
  return event.type === 'timer' && (JSON.parse(event.payloadJson) as { kind?: string }).kind === 'pot-up'
}
