import * as z from 'zod/mini'
import { WorkingLine, namedHead, pageOf, pageQuery, searchText } from './common'
import { Code, Version, decimalField, neededText, optionalText } from './editor-fields'
import { CelsiusText, DecimalText, Flag, InstantText, PercentText, Uuid } from './fields'
import { ComponentRole } from './material-roles'
import { chemistryText } from './materials'
import { ViscosityCup } from './viscosity-cups'

/** Whether a pot life is one value at one temperature, a table of the data sheet, or there is none (null). */
export const PotLifeIs = z.nullable(z.enum(['single', 'table']))
export type PotLifeIs = z.infer<typeof PotLifeIs>

export const MixListQuery = z.strictObject({
  materialId: z.optional(Uuid),
  chemistry: z.optional(chemistryText),
  q: searchText,
  archived: z.optional(Flag),
  ...pageQuery,
})
export type MixListQuery = z.infer<typeof MixListQuery>

/** Parts of one component; `partsMax` where viscosity decides how much. */
export const MixPart = z.object({ parts: DecimalText, partsMax: z.nullable(DecimalText) })
export type MixPart = z.infer<typeof MixPart>

export const MixItem = z.object({
  ...namedHead,
  currentRevisionId: z.nullable(Uuid),
  revisionNumber: z.nullable(z.number()),
  basis: z.nullable(z.enum(['weight', 'volume'])),
  parts: z.array(MixPart),
  baseCode: z.nullable(z.string()),
  baseName: z.nullable(z.string()),
  chemistry: z.nullable(z.string()),
  containsIsocyanates: z.boolean(),
  potLifeIs: PotLifeIs,
  potLifeMin: z.nullable(DecimalText),
  potLifeReferenceC: z.nullable(DecimalText),
})
export type MixItem = z.infer<typeof MixItem>
export const MixList = pageOf(MixItem)
export type MixList = z.infer<typeof MixList>

export const MixComponent = z.object({
  index: z.number(),
  materialId: Uuid,
  materialCode: z.string(),
  materialName: z.string(),
  role: ComponentRole,
  parts: DecimalText,
  partsMax: z.nullable(DecimalText),
  /** Allowed deviation in per cent of the target, given or by default; null where a peroxide's sheet value is missing. */
  tolerancePct: z.nullable(DecimalText),
  toleranceGiven: z.boolean(),
  reactive: z.boolean(),
  densityGPerMl: z.nullable(DecimalText),
  chemistry: z.string(),
  containsIsocyanates: z.boolean(),
  /** Share of the mixed material by weight; null where a ratio by volume lacks a density. */
  sharePct: z.nullable(DecimalText),
})
export type MixComponent = z.infer<typeof MixComponent>

const PotLifePoint = z.object({ c: DecimalText, min: DecimalText })

/** A revision never changes; a change makes the next one. */
export const MixRevision = z.object({
  id: Uuid,
  mixId: Uuid,
  number: z.number(),
  basis: z.enum(['weight', 'volume']),
  potLifeIs: PotLifeIs,
  potLifeMin: z.nullable(DecimalText),
  potLifeReferenceC: z.nullable(DecimalText),
  potLifeTable: z.nullable(z.array(PotLifePoint)),
  halvesPerC: z.nullable(DecimalText),
  potLifeSource: z.nullable(z.string()),
  lateFromPct: DecimalText,
  /** Minutes after which a pot counts as late at the sheet's temperature; null where there is no pot life. */
  lateAfterMin: z.nullable(DecimalText),
  inductionMin: DecimalText,
  viscosity: z.nullable(z.object({
    cup: z.string(),
    secondsMin: z.nullable(DecimalText),
    secondsMax: z.nullable(DecimalText),
    atC: z.nullable(DecimalText),
  })),
  /** Of the mixed material: from the sheet, else by adding volumes; null where a density is missing. */
  densityGPerMl: z.nullable(DecimalText),
  densityIs: z.nullable(z.enum(['given', 'worked-out'])),
  volumeSolidsPct: z.nullable(DecimalText),
  leftoverSharePct: z.nullable(DecimalText),
  notes: z.nullable(z.string()),
  createdAt: InstantText,
  createdByName: z.nullable(z.string()),
  components: z.array(MixComponent),
  /** Shares, density and the late limit, line by line. */
  working: z.array(WorkingLine),
})
export type MixRevision = z.infer<typeof MixRevision>

export const MixRevisionLine = z.object({
  id: Uuid,
  number: z.number(),
  basis: z.enum(['weight', 'volume']),
  parts: z.array(MixPart),
  potLifeIs: PotLifeIs,
  potLifeMin: z.nullable(DecimalText),
  notes: z.nullable(z.string()),
  createdAt: InstantText,
  createdByName: z.nullable(z.string()),
  batchCount: z.number(),
})
export type MixRevisionLine = z.infer<typeof MixRevisionLine>

/** Another revision than the one in force. */
export const MixQuery = z.strictObject({ revisionId: z.optional(Uuid) })
export type MixQuery = z.infer<typeof MixQuery>

export const Mix = z.object({
  ...namedHead,
  /** The revision that pots are mixed by. */
  current: z.nullable(MixRevision),
  /** The revision that was asked for; the one in force unless another was. */
  shown: z.nullable(MixRevision),
  revisions: z.array(MixRevisionLine),
  schedules: z.array(z.object({ id: Uuid, code: z.string(), name: z.string() })),
  createdAt: InstantText,
  updatedAt: InstantText,
})
export type Mix = z.infer<typeof Mix>

const minutes = decimalField('Give minutes.', 7, 3)
const someMinutes = decimalField('Give minutes.', 7, 3, { above: true })

const component = z.strictObject({
  materialId: z.string('Choose a material.').check(z.regex(/^[0-9a-f]{8}-(?:[0-9a-f]{4}-){3}[0-9a-f]{12}$/, 'Choose a material.')),
  role: ComponentRole,
  parts: decimalField('Give its parts.', 7, 4, { above: true }),
  /** Upper end where viscosity decides. */
  partsMax: z.nullable(decimalField('Give its most parts.', 7, 4, { above: true })),
  tolerancePct: z.nullable(PercentText),
  reactive: z.boolean('Say whether it starts the pot life.'),
})

/** What a revision says; null is what the sheet does not. Components stand in pouring order. */
const revision = z.strictObject({
  basis: z.enum(['weight', 'volume'], 'By weight or by volume.'),
  components: z.array(component, 'List the components.').check(z.minLength(1, 'A mix has 1 to 8 components.'), z.maxLength(8, 'A mix has 1 to 8 components.')),
  potLifeMin: z.nullable(someMinutes),
  potLifeReferenceC: z.nullable(CelsiusText),
  potLifeTable: z.nullable(z.array(z.strictObject({ c: CelsiusText, min: someMinutes })).check(z.minLength(1, 'The table has no row.'), z.maxLength(40, 'A table has at most 40 rows.'))),
  halvesPerC: z.nullable(decimalField('Give degrees.', 2, 2, { above: true })),
  potLifeSource: optionalText(200),
  lateFromPct: PercentText,
  inductionMin: minutes,
  viscosity: z.nullable(z.strictObject({
    cup: ViscosityCup,
    secondsMin: z.nullable(decimalField('Give seconds.', 4, 2, { above: true })),
    secondsMax: z.nullable(decimalField('Give seconds.', 4, 2, { above: true })),
    atC: z.nullable(CelsiusText),
  })),
  densityGPerMl: z.nullable(decimalField('Give the density in g/mL.', 2, 5, { above: true })),
  volumeSolidsPct: z.nullable(PercentText),
  leftoverSharePct: z.nullable(PercentText),
  notes: optionalText(1000),
})
export type MixRevisionFields = z.infer<typeof revision>

const names = { code: Code, name: neededText('Give it a name.', 120) }

export const MixCreateBody = z.extend(revision, names)
export type MixCreateBody = z.infer<typeof MixCreateBody>

/** The next revision. `version` is the mix's, so that two people do not write the same one. */
export const MixRevisionBody = z.extend(revision, { version: Version })
export type MixRevisionBody = z.infer<typeof MixRevisionBody>

export const MixPatchBody = z.strictObject({ version: Version, ...z.partial(z.object(names)).shape, archived: z.optional(z.boolean()) })
export type MixPatchBody = z.infer<typeof MixPatchBody>
