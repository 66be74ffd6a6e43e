import * as z from 'zod/mini'
import { D } from '../engine/decimal'
import { DateText, Uuid } from './fields'
import { quantity } from './quantity'
import { scaleSources } from './shop'

const name = z.string('Give it a name.').check(
  z.trim(), z.minLength(1, 'Give it a name.'), z.maxLength(60, 'Keep the name under 60 characters.'),
)

/** What every change carries beside the fields that it changes. */
const changeHead = { version: z.int('Send the version that was changed.'), active: z.optional(z.boolean()) }

const boothShape = {
  name,
  clearanceMeasured: z.boolean('Say whether it was measured.'),
  /** Minutes; not read where the time was not measured. */
  clearanceMin: z.nullable(quantity({ least: '1', most: '1440', decimals: 1 }, 'Give minutes from 1 to 1440, with at most one decimal.')),
}
const clearanceGiven = z.refine<{ clearanceMeasured?: boolean | undefined, clearanceMin?: string | null | undefined }>(
  booth => booth.clearanceMeasured !== true || booth.clearanceMin !== null,
  { error: 'Give the minutes that were measured.', path: ['clearanceMin'] },
)
export const BoothBody = z.strictObject(boothShape).check(clearanceGiven)
export type BoothBody = z.infer<typeof BoothBody>
export const BoothPatchBody = z.extend(z.partial(z.strictObject(boothShape)), changeHead).check(clearanceGiven)

const efficiency = quantity({ above: '0', most: '100', decimals: 2 }, 'Give a percentage above 0 and up to 100.')
const gramsOf = (message: string) => quantity({ least: '0', most: '100000', decimals: 1 }, message)
const gunShape = {
  name,
  kind: z.enum(['cup-gun', 'pressure-pot', 'pump'], 'Choose cup gun, pressure pot or pump.'),
  nozzleMm: z.nullable(quantity({ above: '0', most: '20', decimals: 2 }, 'Give millimetres above 0 and up to 20, with at most two decimals.')),
  boothId: z.nullable(Uuid),
  efficiencyFlatPct: efficiency,
  efficiencyFramesPct: efficiency,
  efficiencySticksPct: efficiency,
  efficiencyMeasured: z.boolean('Say whether it was measured.'),
  residueG: gramsOf('Give grams from 0 on, with at most one decimal.'),
  smallestFillG: gramsOf('Give grams from 0 on, with at most one decimal.'),
  flowGPerMin: z.nullable(quantity({ above: '0', most: '100000', decimals: 1 }, 'Give grams a minute above 0, with at most one decimal.')),
  paceM2PerH: z.nullable(quantity({ above: '0', most: '10000', decimals: 2 }, 'Give square metres an hour above 0, with at most two decimals.')),
}
export const GunBody = z.strictObject(gunShape)
export type GunBody = z.infer<typeof GunBody>
export const GunPatchBody = z.extend(z.partial(z.strictObject(gunShape)), changeHead)

const fine = (message: string) => quantity({ above: '0', most: '10000', decimals: 4 }, message)
const scaleShape = {
  name,
  source: z.enum(scaleSources, 'Say where the weights come from.'),
  divisionG: fine('Give grams above 0, with at most four decimals.'),
  capacityG: quantity({ above: '0', most: '1000000', decimals: 1 }, 'Give grams above 0, with at most one decimal.'),
  mpeG: z.nullable(fine('Give grams above 0, with at most four decimals.')),
  accuracyClass: z.nullable(z.enum(['I', 'II', 'III', 'IIII'], 'Choose a class or none.')),
  verificationIntervalG: z.nullable(fine('Give grams above 0, with at most four decimals.')),
  nextCheckOn: z.nullable(DateText),
}
type ScaleFields = { [Key in keyof typeof scaleShape]?: z.infer<(typeof scaleShape)[Key]> | undefined }

/** Both are decimals that passed their own check; one that is missing is not compared. */
const isLess = (one: string | null | undefined, other: string | null | undefined) =>
  typeof one === 'string' && typeof other === 'string' && new D(one).lt(other)

const scaleRules = [
  z.refine<ScaleFields>(({ divisionG, capacityG }) => !isLess(capacityG, divisionG), { error: 'A scale carries more than one division.', path: ['capacityG'] }),
  z.refine<ScaleFields>(
    ({ accuracyClass, verificationIntervalG }) => !(typeof accuracyClass === 'string' && verificationIntervalG === null),
    { error: 'A class needs its verification interval e.', path: ['verificationIntervalG'] },
  ),
  z.refine<ScaleFields>(
    ({ accuracyClass, verificationIntervalG }) => !(accuracyClass === null && typeof verificationIntervalG === 'string'),
    { error: 'The interval e belongs to a class.', path: ['accuracyClass'] },
  ),
  // OIML R 76-1, 3.4.2: d < e ≤ 10 d with an auxiliary indicating device, e = d without. From memory.
  z.refine<ScaleFields>(
    ({ divisionG, verificationIntervalG }) => !isLess(verificationIntervalG, divisionG),
    { error: 'The interval e is never smaller than the division.', path: ['verificationIntervalG'] },
  ),
] as const
export const ScaleBody = z.strictObject(scaleShape).check(...scaleRules)
export type ScaleBody = z.infer<typeof ScaleBody>
export const ScalePatchBody = z.extend(z.partial(z.strictObject(scaleShape)), changeHead).check(...scaleRules)

const millilitres = quantity({ above: '0', most: '1000000', decimals: 1 }, 'Give millilitres above 0, with at most one decimal.')
const cupShape = { name, capacityMl: millilitres, fillLineMl: millilitres }
const fillLineInside = z.refine<{ capacityMl?: string | undefined, fillLineMl?: string | undefined }>(
  ({ capacityMl, fillLineMl }) => !isLess(capacityMl, fillLineMl),
  { error: 'The fill line cannot lie above the rim.', path: ['fillLineMl'] },
)
export const MixingCupBody = z.strictObject(cupShape).check(fillLineInside)
export type MixingCupBody = z.infer<typeof MixingCupBody>
export const MixingCupPatchBody = z.extend(z.partial(z.strictObject(cupShape)), changeHead).check(fillLineInside)
