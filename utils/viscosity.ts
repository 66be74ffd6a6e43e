import type { Batch } from '#shared/schemas/batches'
import { cupName } from './words'

/** The reading of a cup in words: what is known of it; null where nothing is. */
export function viscosityWords(viscosity: Batch['viscosity']): string | null {
  if (viscosity === null) return null
  const { cup, seconds, materialC } = viscosity
  const reading = [cup === null ? null : cupName(cup), seconds === null ? null : `${seconds} s`].filter(part => part !== null).join(', ')
  if (materialC === null) return reading
  return reading === '' ? `material at ${materialC} °C` : `${reading} at ${materialC} °C`
}
