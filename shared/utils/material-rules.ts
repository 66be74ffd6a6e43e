import { D } from '../engine/decimal'

/** What the rules look at; left out is what a change does not touch. */
interface Facts {
  solidsPct?: string | null | undefined
  waterPct?: string | null | undefined
  exemptPct?: string | null | undefined
  vocGPerL?: string | null | undefined
  vocPct?: string | null | undefined
  containsIsocyanates?: boolean | undefined
  hazardCodes?: readonly string[] | undefined
}

interface Fault {
  path: string
  message: string
}

const given = (text: string | null | undefined): text is string => text !== null && text !== undefined

/** What the figures and statements of one material say against each other; empty where they agree. */
export function materialFaults(facts: Facts): Fault[] {
  const faults: Fault[] = []
  if (given(facts.vocGPerL) && given(facts.vocPct)) {
    faults.push({ path: 'vocPct', message: 'Give grams per litre or per cent by weight, not both.' })
  }
  const shares = [facts.solidsPct, facts.waterPct, facts.exemptPct, facts.vocPct].filter(given)
  if (shares.reduce((sum, share) => sum.plus(share), new D(0)).gt(100)) {
    faults.push({ path: 'solidsPct', message: 'Solids, solvent, water and exempt solvent together are more than 100 %.' })
  }
  if (facts.hazardCodes?.includes('EUH204') && facts.containsIsocyanates === false) {
    faults.push({ path: 'containsIsocyanates', message: 'EUH204 says that it contains isocyanates: tick it.' })
  }
  return faults
}
