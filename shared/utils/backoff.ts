/** No wait between two attempts is longer, so that a screen is back within ten seconds of its server. */
export const longestWaitMs = 5_000

const firstWaitMs = 500

/**
 * How long to wait before trying again, in milliseconds: doubled with every failure and spread, so that a shop's screens
 * do not all come back in the same instant.
 *
 * @param failures attempts that failed in a row, at least 1
 * @param random 0 to 1
 */
export function backoffMs(failures: number, random: number): number {
  const most = Math.min(firstWaitMs * 2 ** Math.min(failures - 1, 10), longestWaitMs)
  return Math.round(most * (0.5 + random / 2))
}
