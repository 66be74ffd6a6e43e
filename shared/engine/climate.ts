import type { Dec } from './decimal'
import { D, HUNDRED, ZERO, print, readDecimal } from './decimal'

export interface DewPointInput {
  airC: string
  rhPct: string
  surfaceC?: string | undefined
}

export interface DewPointAnswer {
  dewPointC: string
  /** Surface above dew point in kelvin; null without a surface. */
  marginC: string | null
  /** At least 3 K; null without a surface. */
  ok: boolean | null
}

/** From metal painting; on wood it warns of condensation and blushing. */
const DEW_POINT_MARGIN_K = '3'

/** Magnus over water, WMO-No. 8 Annex 4.B: b = 17.62, c = 243.12 °C, for −45 to 60 °C. */
const MAGNUS_B = new D('17.62')
const MAGNUS_C = new D('243.12')

/** Dew point, and how far a surface lies above it. */
export function calculateDewPoint(input: DewPointInput): DewPointAnswer {
  const dewPoint = dewPointC(
    readDecimal(input.airC, 'airC', { min: '-45', max: '60' }),
    readDecimal(input.rhPct, 'rhPct', { above: ZERO, max: HUNDRED }),
  )
  if (input.surfaceC === undefined) return { dewPointC: print(dewPoint), marginC: null, ok: null }
  const margin = readDecimal(input.surfaceC, 'surfaceC', { min: '-45', max: '150' }).minus(dewPoint)
  return { dewPointC: print(dewPoint), marginC: print(margin), ok: margin.gte(DEW_POINT_MARGIN_K) }
}

function dewPointC(airC: Dec, rhPct: Dec): Dec {
  const gamma = D.ln(rhPct.div(HUNDRED)).plus(MAGNUS_B.times(airC).div(MAGNUS_C.plus(airC)))
  return MAGNUS_C.times(gamma).div(MAGNUS_B.minus(gamma))
}
