import { afterAll, describe, expect, it } from 'vitest'
import { createKnex } from '../../../server/database/connection'
import { labelAndLog, planInPots, pourToTargets } from '../support/bench'
import { baseUrl } from '../support/browser'
import { useVisitors } from '../support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
const { visitAs } = useVisitors()
afterAll(() => admin.destroy())

interface PotRow { id: string; code: string; plan_id: string; pot_number: number; pot_count: number; job_step_id: string | null }

describe('a planned coat that goes into three pots', () => {
  it('is cut on piece borders, offers the next pot after each, and the log has each with its plan and number', async () => {
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    const standless = await admin('mixes as m').join('mix_revisions as r', 'r.id', 'm.current_revision_id').where({ 'r.induction_min': 0 }).pluck<string[]>('m.name')
    const spans = await planInPots(page, 3, standless)
    expect(spans).toHaveLength(3)
    // Each pot begins with the piece after the one that the pot before it ended with.
    expect(spans[0]?.from).toBe(1)
    expect(spans.slice(1).map(({ from }) => from)).toEqual(spans.slice(0, -1).map(({ to }) => to + 1))

    await page.getByRole('button', { name: 'Start pot 1 of 3: stir the base' }).click()
    const codes: string[] = []
    for (const [place, span] of spans.entries()) {
      await page.getByRole('button', { name: /^It is stirred/ }).click()
      await page.getByRole('region', { name: 'Pour', exact: true }).waitFor()
      await page.getByRole('main').getByText(`pot ${place + 1} of 3`).first().waitFor()
      await page.getByRole('main').getByText(`pieces ${span.from} to ${span.to}`).first().waitFor()
      await pourToTargets(page)
      codes.push(await labelAndLog(page))
      const offered = page.getByRole('button', { name: /^Start pot/ })
      if (place === 2) expect(await offered.count()).toBe(0)
      else {
        expect(await offered.innerText()).toBe(`Start pot ${place + 2} of 3: stir the base`)
        await offered.click()
      }
    }

    const rows = await admin('batches').whereIn('code', codes).orderBy('pot_number').select<PotRow[]>('id', 'code', 'plan_id', 'pot_number', 'pot_count', 'job_step_id')
    expect(rows.map(({ code, pot_number, pot_count }) => ({ code, pot_number, pot_count }))).toEqual(codes.map((code, place) => ({ code, pot_number: place + 1, pot_count: 3 })))
    expect(new Set(rows.map(({ plan_id }) => plan_id)).size).toBe(1)
    expect(new Set(rows.map(({ job_step_id }) => job_step_id)).size).toBe(1)
    expect(rows[0]?.job_step_id).not.toBeNull()
    const pieces = await admin('batch_pieces').whereIn('batch_id', rows.map(({ id }) => id)).select<{ batch_id: string; piece_id: string }[]>('batch_id', 'piece_id')
    const last = spans.at(-1)?.to ?? 0
    expect(pieces.length).toBeGreaterThan(2)
    expect(new Set(pieces.map(({ piece_id }) => piece_id)).size).toBe(pieces.length)
    expect(rows.map(({ id }) => pieces.filter(({ batch_id }) => batch_id === id).length).every((count) => count > 0 && count <= last)).toBe(true)
  }, 240_000)
})
