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

/** An event as an audience gets it: whole, as something that is not in its booth (any more), or not at all. */
export type Hearing = 'whole' | 'gone' | 'nothing'

/**
 * Events of the audience's booth and of no booth are told whole, and so are pots of any booth whose life is up: those
 * alarms hang on every screen of the shop. Any other pot of another booth is told as gone, since it may have been moved
 * there from this one.
 */
export function hearingOf({ boothId }: Audience, event: Addressed): Hearing {
  if (boothId === null || event.boothId === null || event.boothId === boothId) return 'whole'
  const payload = (): { kind?: string; state?: string } | null => JSON.parse(event.payloadJson) as { kind?: string; state?: string } | null
  if (event.type === 'pot') return payload()?.state === 'life-up' ? 'whole' : 'gone'
  return event.type === 'timer' && payload()?.kind === 'pot-up' ? 'whole' : 'nothing'
}
