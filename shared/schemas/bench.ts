import * as z from 'zod/mini'
import { BoothPast } from './booth-cleanings'
import { DraftHolder } from './drafts'
import { scaleSources } from './shop'

/** Instants are ISO 8601 UTC with milliseconds, days `YYYY-MM-DD`, quantities decimal strings. */
const nullableString = z.nullable(z.string())

const componentRoles = ['base', 'hardener', 'thinner', 'additive', 'accelerator', 'peroxide'] as const

export const BenchMaterial = z.object({
  id: z.uuid(),
  code: z.string(),
  name: z.string(),
  role: z.enum([...componentRoles, 'ready-to-use']),
  chemistry: z.string(),
  containsIsocyanates: z.boolean(),
  densityGPerMl: nullableString,
  pricePerKg: nullableString,
  signalWord: z.nullable(z.enum(['Danger', 'Warning'])),
  hazards: z.array(z.object({ code: z.string(), text: z.string() })),
  protectionMixing: nullableString,
  protectionSpraying: nullableString,
})
export type BenchMaterial = z.infer<typeof BenchMaterial>

export const BenchComponent = z.object({
  index: z.number(),
  materialId: z.uuid(),
  role: z.enum(componentRoles),
  parts: z.string(),
  partsMax: nullableString,
  tolerancePct: nullableString,
  reactive: z.boolean(),
})
export type BenchComponent = z.infer<typeof BenchComponent>

/** A mix with its present revision. `lateFromPct` is the share of pot life after which a pot counts as late. */
export const BenchMix = z.object({
  id: z.uuid(),
  code: z.string(),
  name: z.string(),
  revisionId: z.uuid(),
  revisionNumber: z.number(),
  basis: z.enum(['weight', 'volume']),
  potLifeMin: nullableString,
  potLifeReferenceC: nullableString,
  potLifeTable: z.nullable(z.array(z.object({ c: z.string(), min: z.string() }))),
  halvesPerC: nullableString,
  lateFromPct: z.string(),
  inductionMin: z.string(),
  viscosityCup: nullableString,
  viscositySecondsMin: nullableString,
  viscositySecondsMax: nullableString,
  densityGPerMl: nullableString,
  notes: nullableString,
  components: z.array(BenchComponent),
})
export type BenchMix = z.infer<typeof BenchMix>

/**
 * A lot with something in it, first the one that expires first; those with no date last. Those that are out of date or
 * blocked are among them: the bench shows what they are and refuses them.
 */
export const BenchLot = z.object({
  id: z.uuid(),
  materialId: z.uuid(),
  lotNumber: z.string(),
  expiresOn: nullableString,
  openedAt: nullableString,
  state: z.enum(['sealed', 'in-use', 'blocked']),
  blockedReason: nullableString,
  place: nullableString,
  pricePerKg: nullableString,
  stockG: z.string(),
})
export type BenchLot = z.infer<typeof BenchLot>

export const BenchGun = z.object({
  id: z.uuid(),
  name: z.string(),
  kind: z.enum(['cup-gun', 'pressure-pot', 'pump']),
  boothId: z.nullable(z.uuid()),
  efficiencyPct: z.object({ flat: z.string(), frames: z.string(), sticks: z.string() }),
  efficiencyMeasured: z.boolean(),
  residueG: z.string(),
  smallestFillG: z.string(),
  flowGPerMin: nullableString,
  paceM2PerH: nullableString,
})
export type BenchGun = z.infer<typeof BenchGun>

export const BenchScale = z.object({
  id: z.uuid(),
  name: z.string(),
  source: z.enum(scaleSources),
  divisionG: z.string(),
  capacityG: z.string(),
  mpeG: nullableString,
})
export type BenchScale = z.infer<typeof BenchScale>

export const BenchCup = z.object({ id: z.uuid(), name: z.string(), capacityMl: z.string(), fillLineMl: z.string() })
export type BenchCup = z.infer<typeof BenchCup>

export const BenchBooth = z.object({
  id: z.uuid(),
  name: z.string(),
  /** What was sprayed there since booth, duct and filters were last recorded clean, the latest first. */
  past: z.array(BoothPast),
  cleanedAt: nullableString,
  /** Last reading not older than twelve hours, degrees Celsius and per cent. */
  climate: z.nullable(z.object({ airC: z.string(), rhPct: z.string(), surfaceC: nullableString, at: z.string() })),
})
export type BenchBooth = z.infer<typeof BenchBooth>

export const BenchPerson = z.object({ id: z.uuid(), name: z.string(), initials: z.string() })
export type BenchPerson = z.infer<typeof BenchPerson>

const benchReadiness = ['ready', 'mixing', 'wait', 'sand', 'held', 'done'] as const

/** A coat of a running job that stands next. */
export const BenchStep = z.object({
  jobStepId: z.uuid(),
  jobId: z.uuid(),
  jobCode: z.string(),
  jobTitle: z.string(),
  stepPosition: z.number(),
  stepTitle: z.string(),
  mixId: z.nullable(z.uuid()),
  mixRevisionId: z.nullable(z.uuid()),
  filmWeightGsm: nullableString,
  filmWeightIs: z.nullable(z.enum(['deposited', 'sprayed'])),
  coats: z.number(),
  gunShape: z.enum(['flat', 'frames', 'sticks']),
  boothId: z.nullable(z.uuid()),
  gunId: z.nullable(z.uuid()),
  pieces: z.array(z.object({
    id: z.uuid(),
    label: z.string(),
    /** Area of all of them together, both faces where both are coated. */
    areaM2: z.string(),
    quantity: z.number(),
    faces: z.enum(['front', 'back', 'both', 'edges', 'all']),
    rack: nullableString,
    heldReason: nullableString,
    /** Coats of this step that are neither sprayed nor mixed nor being mixed for it; 0 where all are. */
    coatsLeft: z.number(),
  })),
  /** Sum over the pieces that are not held and have coats left, of those that the readiness speaks of. */
  areaM2: z.string(),
  ready: z.enum(benchReadiness),
  /** Why it cannot be sprayed now, in words; null when it can. */
  reason: nullableString,
  /** When the reason ends or the chance does, where an instant is known. */
  until: nullableString,
})
export type BenchStep = z.infer<typeof BenchStep>

/** A batch that is being made and was not sealed. */
export const BenchDraft = z.object({
  id: z.uuid(),
  code: z.string(),
  seq: z.number(),
  potNumber: z.number(),
  potCount: z.number(),
  mixRevisionId: z.uuid(),
  mixName: z.string(),
  jobStepId: z.nullable(z.uuid()),
  boothId: z.nullable(z.uuid()),
  mixedByUserId: z.uuid(),
  mixedByName: z.string(),
  reactiveAt: nullableString,
  /** When its pot life is over; null where nothing in it reacts yet. */
  endsAt: nullableString,
  pouredG: z.string(),
  /** The bench that it was last written at; null where that is none. */
  deviceName: nullableString,
  holder: z.nullable(DraftHolder),
  updatedAt: z.string(),
})
export type BenchDraft = z.infer<typeof BenchDraft>

/** Which chemistries may not follow each other in a booth. */
const BenchChemistryRule = z.object({
  scope: z.literal('booth'), first: z.string(), second: z.string(), verdict: z.enum(['blocked', 'caution']), advice: z.string(),
})

/** How fast somebody coats with a gun: square metres an hour, first to last spray, over so many of the last pots. */
export const BenchPace = z.object({ userId: z.uuid(), gunId: z.uuid(), m2PerH: z.string(), batches: z.number() })
export type BenchPace = z.infer<typeof BenchPace>

/** All that a bench needs to work from, read at one instant. */
export const BenchSnapshot = z.object({
  serverNow: z.string(),
  lastSeq: z.number(),
  mixes: z.array(BenchMix),
  /** Revisions no longer in use that pots are still being made by; missing from what an older bench has kept. */
  heldMixes: z.optional(z.array(BenchMix)),
  materials: z.array(BenchMaterial),
  lots: z.array(BenchLot),
  guns: z.array(BenchGun),
  scales: z.array(BenchScale),
  cups: z.array(BenchCup),
  booths: z.array(BenchBooth),
  people: z.array(BenchPerson),
  today: z.array(BenchStep),
  drafts: z.array(BenchDraft),
  chemistryRules: z.array(BenchChemistryRule),
  paces: z.array(BenchPace),
})
export type BenchSnapshot = z.infer<typeof BenchSnapshot>
