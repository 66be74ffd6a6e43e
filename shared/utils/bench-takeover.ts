import type { DraftHolder, DraftSummary } from '../schemas/drafts'

/** Whether another tablet holds the batch that it makes, by what the server last listed. */
export function isTakenOver(draft: Pick<DraftSummary, 'holder'>, holder: DraftHolder): boolean {
  if (draft.holder === null) return false
  return draft.holder.turn > holder.turn || (draft.holder.turn === holder.turn && draft.holder.id !== holder.id)
}

export const takenOverWords = ({ code, deviceName, mixedByName }: Pick<DraftSummary, 'code' | 'deviceName' | 'mixedByName'>): string =>
  `${code} was taken over at ${deviceName ?? 'another tablet'} by ${mixedByName}.`

/** Whether somebody may go on with a batch here: its own mixer and a senior anywhere, another sprayer at an enrolled bench only. */
export function mayGoOn(draft: { mixedByUserId: string }, asker: { userId: string, role: string, isBench: boolean }): boolean {
  return draft.mixedByUserId === asker.userId || asker.role !== 'sprayer' || asker.isBench
}
