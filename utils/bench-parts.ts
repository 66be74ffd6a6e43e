/**
 * Fetches what the bench does not show at first: a pot's figures, its steps and the questions that may come up meanwhile. Once
 * fetched they are there without a network too.
 *
 * @returns when all are there; rejects where one cannot be fetched, a next call tries again
 */
export const fetchBenchParts = (): Promise<unknown> => Promise.all([
  import('#shared/utils/bench-engine'),
  import('~/components/bench/BenchBarSheet.vue'),
  import('~/components/bench/BenchStir.vue'),
  import('~/components/bench/BenchPour.vue'),
  import('~/components/bench/BenchPourHalt.vue'),
  import('~/components/bench/BenchStand.vue'),
  import('~/components/bench/BenchLabel.vue'),
  import('~/components/bench/BenchLogged.vue'),
  import('~/components/bench/BenchHazards.vue'),
  import('~/components/bench/BenchHazardSheet.vue'),
  import('~/components/bench/BenchRefused.vue'),
  import('~/components/bench/BenchBoothClean.vue'),
  import('~/components/bench/BenchSetupCup.vue'),
  import('~/components/bench/BenchPots.vue'),
  import('~/components/bench/BenchPickPieces.vue'),
  import('~/components/bench/BenchStepDone.vue'),
  import('~/components/bench/BenchTodayAside.vue'),
  import('~/components/bench/BenchTodayDraftSheet.vue'),
  import('~/components/base/BaseDialogSheet.vue'),
  import('~/components/base/BaseWorkingSheet.vue'),
])
