import { firstLots } from '#shared/utils/bench-lots'
import { toolChoice } from '#shared/utils/bench-setup'
import { newUuid } from '#shared/utils/uuid'
import type { BenchPlanKept } from '~/composables/useBenchDisk'
import { useBenchStore } from '~/stores/bench'
import { useSessionStore } from '~/stores/session'

/** Begins pots of a plan: the first from the form, the others from what was planned then. */
export function useBenchStart() {
  const bench = useBenchStore()
  const session = useSessionStore()

  async function startPot(plan: BenchPlanKept, number: number): Promise<void> {
    const pot = plan.pots.find(one => one.number === number)
    const { benchTools, startRun } = await bench.fetchEngine()
    const { snapshot } = bench
    const tools = snapshot === null ? null : benchTools(toolChoice(plan.setup), snapshot)
    if (snapshot === null || tools === null || pot === undefined || session.user === null) return
    await bench.begin(startRun({
      id: newUuid(),
      planId: plan.id,
      pot,
      potCount: plan.pots.length,
      tools,
      jobStepId: plan.setup.stepId,
      purpose: plan.setup.loose ? plan.setup.purpose.trim() : null,
      mixedByUserId: session.user.id,
      lots: firstLots(snapshot, tools.parts.map(({ materialId }) => materialId), bench.today()),
    }), plan)
  }

  async function startPlan(): Promise<void> {
    const { reckoning, setup } = bench
    if (reckoning === null || setup === null || reckoning.pots.length === 0) return
    await startPot({ id: newUuid(), setup: { ...setup }, pots: reckoning.pots }, 1)
  }

  return { startPlan, startPot }
}
