import type { BenchSnapshot } from '../schemas/bench'
import { clashOfSetup } from './bench-booth'
import type { BenchReckoning } from './bench-reckon'
import type { BenchSetup } from './bench-setup'

/** What stands beside a field. `field` is one of the form's own. */
export interface BenchFault {
  field: keyof BenchSetup | 'form'
  message: string
  /** Not given yet, given and impossible, or against the fire rule of the booth. */
  kind: 'missing' | 'refused' | 'clash'
}

/** The form without figures: what is still missing and what may not be sprayed there. It needs no arithmetic. */
export function unreckoned(setup: BenchSetup, snapshot: BenchSnapshot): BenchReckoning {
  return {
    faults: [...missing(setup), ...clashing(setup, snapshot)],
    tools: null, whole: null, pots: [], boundBy: 'one-pot', cautions: [], totalG: null, reserveG: null,
  }
}

/** What may not be sprayed in the chosen booth; nobody approves it, the booth is cleaned. */
function clashing(setup: BenchSetup, snapshot: BenchSnapshot): BenchFault[] {
  const clash = clashOfSetup(setup, snapshot)
  return clash?.verdict === 'blocked' ? [{ field: 'boothId', message: clash.words, kind: 'clash' }] : []
}

function missing(setup: BenchSetup): BenchFault[] {
  const faults: BenchFault[] = []
  const need = (given: boolean, field: keyof BenchSetup, message: string): void => {
    if (!given) faults.push({ field, message, kind: 'missing' })
  }
  need(!setup.loose || setup.purpose.trim() !== '', 'purpose', 'Say what the mix is for.')
  need(setup.mixId !== '', 'mixId', 'Choose the material.')
  need(setup.way !== 'area' || setup.areaM2 !== '', 'areaM2', 'Give the panel area.')
  need(setup.way !== 'total' || setup.totalG !== '', 'totalG', 'Give the grams to mix.')
  need(setup.way !== 'tin' || setup.tinG !== '', 'tinG', 'Weigh what is left in the tin.')
  need(setup.way !== 'area' || setup.filmWeightGsm !== '', 'filmWeightGsm', 'Give the wet coat weight.')
  need(setup.filmWeightGsm === '' || setup.filmWeightIs !== null, 'filmWeightIs', 'Say where the coat weight is meant.')
  need(setup.gunId !== '', 'gunId', 'Choose the gun.')
  need(setup.cupId !== '', 'cupId', 'Choose a cup.')
  need(setup.scaleId !== '', 'scaleId', 'Choose a scale.')
  return faults
}
