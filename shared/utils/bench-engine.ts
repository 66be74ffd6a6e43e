import { draftOf } from './bench-draft'
import { staysHere } from './bench-left'
import { reckon, withFittingCup } from './bench-reckon'
import { startRun } from './bench-run'
import { benchTools } from './bench-tools'

/** All of the bench that reckons, in one piece: an empty form asks nothing of it, so the page fetches it apart. */
export const benchEngine = { benchTools, draftOf, reckon, startRun, staysHere, withFittingCup }
