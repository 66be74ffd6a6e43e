import { useOnline } from '@vueuse/core'
import { defineStore } from 'pinia'
import { computed, ref, shallowRef } from 'vue'
import type { Batch } from '#shared/schemas/batches'
import type { BenchSnapshot } from '#shared/schemas/bench'
import type { Draft, DraftHolder, DraftList } from '#shared/schemas/drafts'
import { unreckoned } from '#shared/utils/bench-faults'
import { isNews, refusalOf, type BenchAside, type BenchRefusal } from '#shared/utils/bench-refusal'
import type { BenchRun } from '#shared/utils/bench-run'
import { blankSetup, setupAfterPot, type BenchHome, type BenchSetup } from '#shared/utils/bench-setup'
import { isTakenOver, takenOverWords } from '#shared/utils/bench-takeover'
import { toIso } from '#shared/utils/instant'
import { shopDate } from '#shared/utils/zone'
import { useBenchAside } from '~/composables/useBenchAside'
import { useBenchDisk, type BenchPlanKept } from '~/composables/useBenchDisk'
import { useBenchEngine } from '~/composables/useBenchEngine'
import { useBenchNumbers } from '~/composables/useBenchNumbers'
import { useClockStore } from '~/stores/clock'
import { useOutboxStore } from '~/stores/outbox'
import { useSessionStore } from '~/stores/session'
import { afterPaint } from '~/utils/after-paint'
import { callApi, toFailure } from '~/utils/api'

/** Drafts go out this long after the last change; at steps and at the start of a pot life at once. */
const SAVE_AFTER_MS = 1_500

/** The mix being made at this bench. It holds what is, and writes it down; what follows from it is reckoned elsewhere. */
export const useBenchStore = defineStore('bench', () => {
  const session = useSessionStore()
  const outbox = useOutboxStore()
  const clock = useClockStore()
  const disk = useBenchDisk()
  const numbers = useBenchNumbers(disk)
  const aside = useBenchAside(disk)
  const { engine, isMissing: isEngineMissing, fetchEngine, hasEngine } = useBenchEngine()

  const status = ref<'loading' | 'ready' | 'error'>('loading')
  const failure = ref<string | null>(null)
  /** Large and never changed in part. */
  const snapshot = shallowRef<BenchSnapshot | null>(null)
  const snapshotAt = ref<number | null>(null)
  /** The list is from the tablet's disk: the server did not answer. */
  const isOffline = ref(false)
  /** The clock's offset of the last time online, for a tablet that starts without network. */
  const keptOffsetMs = ref<number | null>(null)
  /** The server's clock less this tablet's, ms; null while it was never measured. */
  const offsetMs = computed(() => clock.offsetMs ?? keptOffsetMs.value)
  const setup = ref<BenchSetup | null>(null)
  const plan = shallowRef<BenchPlanKept | null>(null)
  const run = shallowRef<BenchRun | null>(null)
  /** This tablet's own name for itself, and its turn at the batch at hand. */
  const tabletId = ref<string | null>(null)
  const turn = ref(0)
  const holder = computed<DraftHolder | null>(() => (tabletId.value === null ? null : { id: tabletId.value, turn: turn.value }))
  /** Why the server no longer takes the batch at hand from this tablet; null while it does. */
  const refusal = ref<BenchRefusal | null>(null)
  /** The pot at hand as the log has it. */
  const logged = shallowRef<Batch | null>(null)
  /** The form was changed and is not on the disk yet. */
  let keepsSoon = false
  let saveTimer: ReturnType<typeof setTimeout> | undefined

  const isOnline = useOnline()
  const zone = computed(() => session.shop?.zone ?? 'UTC')
  /** Nothing reaches the server from here now. */
  const isAway = computed(() => isOffline.value || outbox.unreachable || !isOnline.value)
  const home = computed<BenchHome>(() => ({ boothId: session.device?.boothId ?? null, scaleId: session.device?.scaleId ?? null, userId: session.user?.id ?? null }))
  const reckoning = computed(() => (setup.value && snapshot.value ? (engine.value?.reckon ?? unreckoned)(setup.value, snapshot.value) : null))
  const tools = computed(() => (run.value && snapshot.value && engine.value ? engine.value.benchTools({ ...run.value.tools, revisionId: run.value.mixRevisionId }, snapshot.value) : null))

  /** Added to what the one clock of all screens says while that was not measured yet. */
  const startOffsetMs = computed(() => (clock.offsetMs === null ? keptOffsetMs.value ?? 0 : 0))
  const now = (): number => clock.serverNow() + startOffsetMs.value
  const today = (): string => shopDate(now(), zone.value)

  /** Reads what was left on the tablet, then the shop's present state. */
  async function load(): Promise<void> {
    status.value = snapshot.value === null ? 'loading' : status.value
    if (session.unreachable && !session.user) await session.load()
    const userId = session.user?.id
    if (userId === undefined) return fail('Nobody was signed in at this bench before the network went. Signing in needs it: try again when it is back.')
    tabletId.value ??= await disk.readTabletId()
    await numbers.load()
    await aside.load()
    await outbox.load()
    if (run.value === null) await restore(userId)
    // What was left here has figures; an empty form has none.
    if ((run.value !== null || setup.value?.mixId) && !await hasEngine()) return fail('What the bench reckons with is not on this tablet yet: it needs the network once. Try again when it is back.')
    await refresh()
    // What was changed just before a crash may not have gone out.
    if (run.value !== null && run.value.stage !== 'logged') await save()
  }

  function fail(why: string): void {
    failure.value = why
    status.value = 'error'
  }

  async function restore(userId: string): Promise<void> {
    const kept = await disk.readKept()
    if (kept === undefined) return
    // A cup that is not in the log stays on this bench whoever signs in; a form belongs to the person who filled it.
    if (kept.run !== null && kept.run.stage !== 'logged') {
      run.value = kept.run
      turn.value = kept.turn ?? 0
    }
    if (kept.userId === userId || run.value !== null) {
      setup.value = kept.setup
      plan.value = kept.plan
    }
  }

  async function refresh(): Promise<void> {
    try {
      const answer = await callApi<BenchSnapshot>('/api/bench/snapshot')
      await clock.measureClock()
      const at = Date.parse(answer.serverNow)
      take(answer, at, false)
      session.keepLast()
      await disk.writeSnapshot({ snapshot: answer, at, offsetMs: offsetMs.value })
      if (session.device?.kind === 'bench') await numbers.fill()
    } catch (error) {
      await readLast(toFailure(error).message, toFailure(error).passing)
    }
  }

  async function readLast(message: string, isPassing: boolean): Promise<void> {
    const kept = isPassing ? await disk.readSnapshot() : undefined
    failure.value = message
    if (kept === undefined) status.value = snapshot.value === null ? 'error' : status.value
    else {
      keptOffsetMs.value = kept.offsetMs
      take(kept.snapshot, kept.at, true)
    }
  }

  function take(next: BenchSnapshot, at: number, offline: boolean): void {
    snapshot.value = next
    snapshotAt.value = at
    isOffline.value = offline
    if (!offline) failure.value = null
    setup.value ??= blankSetup(next, home.value)
    status.value = 'ready'
    if (isEngineMissing.value && !offline) void reckonLater()
  }

  async function keep(): Promise<void> {
    keepsSoon = false
    if (!setup.value || !session.user) return
    await disk.writeKept({ userId: session.user.id, setup: setup.value, plan: plan.value, run: run.value, turn: turn.value })
  }

  /** A key's new figures are on the screen before they go to the disk; keys that come close together are written once. */
  function changeSetup(next: BenchSetup): void {
    setup.value = engine.value && snapshot.value ? engine.value.withFittingCup(next, snapshot.value) : next
    if (engine.value === null) void reckonLater()
    if (keepsSoon) return
    keepsSoon = true
    afterPaint(() => void keepChanged())
  }

  /** The first change of an empty form fetches what reckons; figures and the fitting cup follow. */
  async function reckonLater(): Promise<void> {
    if (await hasEngine() && setup.value) changeSetup(setup.value)
  }

  /** Writes what a change of the form has not written yet: nothing waits when the page goes. */
  async function keepChanged(): Promise<void> {
    if (keepsSoon) await keep()
  }

  /** A change of the cup: on the tablet at once, to the server soon, or now where it may not wait. */
  async function change(next: BenchRun, when: 'now' | 'soon'): Promise<void> {
    const startsLife = next.reactiveAt !== null && run.value?.reactiveAt !== next.reactiveAt
    run.value = { ...next, seq: next.seq + 1 }
    await keep()
    clearTimeout(saveTimer)
    if (when === 'now' || startsLife) await save()
    else saveTimer = setTimeout(() => void save(), SAVE_AFTER_MS)
  }

  async function save(): Promise<void> {
    clearTimeout(saveTimer)
    const { value } = run
    if (value === null || refusal.value?.code === 'taken-over') return
    const { draftOf } = await fetchEngine()
    const body = draftOf(value, toIso(Date.now()), offsetMs.value === null ? null : Math.round(offsetMs.value), holder.value)
    await outbox.put({ subject: value.id, kind: 'draft', method: 'PUT', path: `/api/batch-drafts/${value.id}`, body: { ...body } })
  }

  /** A pot of a plan begins. */
  async function begin(next: BenchRun, of: BenchPlanKept): Promise<void> {
    plan.value = of
    turn.value = 0
    await open(isAway.value ? { ...next, code: await numbers.take() } : next)
  }

  /** Goes on here with a batch that another tablet has begun; that one is refused from then on. */
  async function takeOver(id: string): Promise<void> {
    // It needs the network anyhow, and only then what reads another tablet's state.
    const [draft, { runOfDraft }] = await Promise.all([callApi<Draft>(`/api/batch-drafts/${id}`), import('#shared/utils/bench-takeover-run'), fetchEngine()])
    const next = snapshot.value && session.user ? runOfDraft(draft, snapshot.value, session.user.id) : null
    if (draft.state !== 'open') throw new Error(`${draft.code} is in the log already.`)
    if (next === null) throw new Error('Its mix, cup or scale is not in this bench\'s list: go on with it where it was begun.')
    plan.value = null
    turn.value = (draft.holder?.turn ?? 0) + 1
    await open({ ...next, tools: { ...next.tools, scaleId: home.value.scaleId ?? next.tools.scaleId } })
  }

  async function open(next: BenchRun): Promise<void> {
    logged.value = null
    refusal.value = null
    await change(next, 'now')
  }

  /** Asks whether another tablet has gone on with the batch at hand. */
  async function checkHeld(): Promise<void> {
    if (run.value === null || run.value.stage === 'logged' || holder.value === null || outbox.entries.some(({ subject }) => subject === run.value?.id)) return
    const drafts = await callApi<DraftList>('/api/batch-drafts').catch((error: unknown) => {
      if (!toFailure(error).passing) throw error
      return null
    })
    const listed = drafts?.items.find(({ id }) => id === run.value?.id)
    if (listed !== undefined && isTakenOver(listed, holder.value)) refusal.value = { code: 'taken-over', message: takenOverWords(listed), lotId: null }
  }

  /** Into the record: the last draft first, then the seal, in this order also without a network. */
  async function seal(next: BenchRun): Promise<void> {
    await change(next, 'now')
    await outbox.put({ subject: next.id, kind: 'seal', method: 'POST', path: '/api/batches', body: { draftId: next.id, holder: holder.value } })
  }

  /** Gives up a cup that nothing came into: its last draft first, then the word that its number is void. */
  async function discard(reason: string): Promise<void> {
    const { value } = run
    if (value === null) return
    await save()
    await outbox.put({ subject: value.id, kind: 'seal', method: 'POST', path: `/api/batch-drafts/${value.id}/discard`, body: { reason, holder: holder.value } })
    await leave()
  }

  /** Leaves the cup that is in the log; the form stands for what is left to mix. */
  async function leave(): Promise<void> {
    run.value = null
    logged.value = null
    await keep()
    await refresh()
    if (setup.value && snapshot.value) changeSetup(setupAfterPot(setup.value, snapshot.value, home.value))
  }

  /** Leaves a batch that the server does not take from this tablet. It is not sent any more; grams of it stay here. */
  async function giveUp(): Promise<void> {
    const [{ value }, { staysHere }] = [run, await fetchEngine()]
    if (value !== null && staysHere(value, refusal.value, outbox.entries.some(({ subject }) => subject === value.id))) {
      const { code, message } = refusal.value ?? { code: 'left', message: '' }
      await aside.put({ id: value.id, run: value, turn: turn.value, at: now(), refusal: { code, message } })
    }
    if (value !== null) await outbox.drop(value.id)
    run.value = null
    refusal.value = null
    await keep()
    await refresh()
  }

  /** Takes a batch up again that was laid aside here: it is sent once more. */
  async function takeUp(kept: BenchAside): Promise<void> {
    await fetchEngine()
    plan.value = null
    turn.value = kept.turn
    logged.value = null
    refusal.value = null
    if (kept.run.stage === 'logged') await seal(kept.run)
    else await change(kept.run, 'now')
    await aside.drop(kept.id)
  }

  outbox.listenToRefusals((entry, said) => {
    const found = refusalOf(entry, said)
    if (run.value?.id !== entry.subject || found === null || !isNews(run.value, found)) return
    refusal.value = found
    // What is wrong with a tin stands in the list.
    if (found.lotId !== null) void refresh()
  })
  outbox.listen((entry, answer) => {
    if (run.value?.id !== entry.subject) return
    if (entry.kind === 'seal') logged.value = answer as Batch
    if (refusal.value !== null && refusal.value.code !== 'taken-over') refusal.value = null
    const { code, potLife } = answer as Draft
    run.value = { ...run.value, code, potLife }
    void keep()
  })

  return {
    status, failure, snapshot, snapshotAt, isOffline, offsetMs, startOffsetMs, isAway, numbers: numbers.held, setup, plan, run, refusal, logged, zone, home, reckoning, tools,
    aside: aside.kept, dropAside: aside.drop, now, today, load, refresh, changeSetup, keepChanged, change, begin, takeOver, checkHeld, seal, discard, leave, giveUp,
    takeUp, isEngineMissing, fetchEngine,
  }
})
