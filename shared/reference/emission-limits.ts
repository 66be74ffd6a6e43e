/**
 * Limits of hazardous air pollutant for finishing wood furniture, 40 CFR 63 Subpart JJ. New sources: from memory.
 * Local rules may be tighter; the shop's own limit is what reports compare with.
 */
export const woodFurnitureLimits = {
  existing: { kgPerKgSolids: '1.0', thinnerMaxPct: '10.0', onSiteMixThinnerMaxPct: '3.0' },
  new: { kgPerKgSolids: '0.8', thinnerMaxPct: '10.0', onSiteMixThinnerMaxPct: '3.0' },
} as const

/** Smallest face velocity of a spray booth, ft/min: 29 CFR 1910.107(b)(5). */
export const boothFaceVelocityFtPerMin = { manual: '100', electrostatic: '60' } as const
