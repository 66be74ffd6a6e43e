import { D, print } from '../engine/decimal'
import { convertUnit } from '../engine/units'

/** Decimals of grams as the record keeps them. */
const keptDecimals = 4

/** Grams of so many litres. @param densityGPerMl of the material as supplied */
export const gramsOfLitres = (litres: string, densityGPerMl: string): string =>
  print(new D(convertUnit(litres, 'L', 'mL')).times(densityGPerMl).toDecimalPlaces(keptDecimals))

/** Grams of so many kilograms. */
export const gramsOfKilograms = (kilograms: string): string => convertUnit(kilograms, 'kg', 'g')
