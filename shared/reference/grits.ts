/**
 * Average grain of coated abrasives in micrometres, FEPA / ISO 6344 P grades. P150, P220, P320, P400 and P600 were read in
 * a printed table, the others are from memory. What a shop calls P380 lies between P360 and P400 and is no grade of the
 * standard.
 */
const AVERAGE_UM: Readonly<Record<string, string>> = {
  P12: '1815',
  P16: '1324',
  P20: '1000',
  P24: '764',
  P30: '642',
  P36: '538',
  P40: '425',
  P50: '336',
  P60: '269',
  P80: '201',
  P100: '162',
  P120: '125',
  P150: '100',
  P180: '82',
  P220: '68',
  P240: '58.5',
  P280: '52.2',
  P320: '46.2',
  P360: '40.5',
  P400: '35',
  P500: '30.2',
  P600: '25.8',
  P800: '21.8',
  P1000: '18.3',
  P1200: '15.3',
  P1500: '12.6',
  P2000: '10.3',
  P2500: '8.4',
}

/** Grades from coarse to fine. */
export const grits: readonly { grade: string, averageUm: string }[] = Object.entries(AVERAGE_UM)
  .map(([grade, averageUm]) => ({ grade, averageUm }))

/** Average grain of a grade, or null for a figure that is no grade of the standard. */
export function grainUm(grade: string): string | null {
  return Object.hasOwn(AVERAGE_UM, grade) ? AVERAGE_UM[grade] ?? null : null
}
