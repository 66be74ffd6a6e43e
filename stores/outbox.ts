import { defineStore } from 'pinia'
import { computed, ref } from 'vue'
import { dueAgain, heldBack, nextDueAt, nextEntry, passes, refused, waited, withEntry, type OutboxEntry } from '#shared/utils/bench-outbox'
import { LOT_REFUSAL_CODES } from '#shared/utils/bench-refusal'
import { newUuid } from '#shared/utils/uuid'
import { useBenchDisk } from '~/composables/useBenchDisk'
import { callApi, toFailure } from '~/utils/api'

type OutboxWork = Pick<OutboxEntry, 'subject' | 'kind' | 'method' | 'path' | 'body'>
type Listener = (entry: OutboxEntry, answer: unknown) => void
type RefusalListener = (entry: OutboxEntry, refusal: NonNullable<OutboxEntry['refusal']>) => void

/** What this tablet has written and the server has not yet confirmed. It goes by itself, in order, until it is through. */
export const useOutboxStore = defineStore('outbox', () => {
  const disk = useBenchDisk()
  const entries = ref<OutboxEntry[]>([])
  const sendingId = ref<string | null>(null)
  /** The last try did not reach the server. */
  const unreachable = ref(false)
  const listeners = new Set<Listener>()
  const refusalListeners = new Set<RefusalListener>()
  let timer: ReturnType<typeof setTimeout> | undefined

  const waiting = computed(() => entries.value.length)
  const refusals = computed(() => entries.value.filter(({ refusal }) => refusal !== null))

  async function load(): Promise<void> {
    entries.value = await disk.readOutbox()
    void flush()
  }

  /** Writes it down here, then sends what is due. Resolves when it is safe on this tablet. */
  async function put(work: OutboxWork): Promise<void> {
    const at = Date.now()
    const entry: OutboxEntry = {
      ...work,
      id: newUuid(),
      idempotencyKey: work.method === 'POST' ? newUuid() : null,
      createdAt: Math.max(at, (entries.value.at(-1)?.createdAt ?? 0) + 1),
      tries: 0,
      nextAt: at,
      refusal: null,
    }
    const before = entries.value
    entries.value = withEntry(before, entry, sendingId.value)
    const gone = before.filter(({ id }) => !entries.value.some(kept => kept.id === id)).map(({ id }) => id)
    await disk.writeOutbox([entry], gone)
    void flush()
  }

  /** Sends one after the other until nothing is due. */
  async function flush(): Promise<void> {
    if (sendingId.value !== null) return
    clearTimeout(timer)
    for (let entry = nextEntry(entries.value, Date.now()); entry; entry = nextEntry(entries.value, Date.now())) {
      await send(entry)
    }
    const dueAt = nextDueAt(entries.value)
    if (dueAt !== null) timer = setTimeout(() => void flush(), Math.max(50, dueAt - Date.now()))
  }

  async function send(entry: OutboxEntry): Promise<void> {
    sendingId.value = entry.id
    try {
      const answer = await callApi<unknown>(entry.path, { method: entry.method, body: entry.body, idempotencyKey: entry.idempotencyKey ?? undefined })
      unreachable.value = false
      entries.value = entries.value.filter(({ id }) => id !== entry.id)
      await disk.writeOutbox([], [entry.id])
      for (const listener of listeners) listener(entry, answer)
    } catch (error) {
      await setAside(entry, error)
    } finally {
      sendingId.value = null
    }
  }

  async function setAside(entry: OutboxEntry, error: unknown): Promise<void> {
    const { status, code, message, fields } = toFailure(error)
    unreachable.value = status === 0
    const refusal = passes(status) ? null : { status, code, message, path: fields[0]?.path }
    const kept = refusal === null ? waited(entry, Date.now(), Math.random()) : LOT_REFUSAL_CODES.has(code) ? heldBack(entry, Date.now()) : refused(entry, refusal)
    entries.value = entries.value.map(other => (other.id === entry.id ? kept : other))
    await disk.writeOutbox([kept], [])
    if (refusal !== null) for (const listener of refusalListeners) listener(kept, refusal)
  }

  /** Everything, or what is about one subject, without waiting for its turn: the network is back, or somebody asked. */
  async function retry(subject?: string): Promise<void> {
    entries.value = dueAgain(entries.value, subject)
    await disk.writeOutbox(entries.value, [])
    await flush()
  }

  /** Takes a refused subject out: somebody read why and let it go. */
  async function drop(subject: string): Promise<void> {
    const gone = entries.value.filter(entry => entry.subject === subject).map(({ id }) => id)
    entries.value = entries.value.filter(entry => entry.subject !== subject)
    await disk.writeOutbox([], gone)
  }

  /** Calls back with each answer. Answers the function that stops it. */
  function listen(listener: Listener): () => void {
    listeners.add(listener)
    return () => listeners.delete(listener)
  }

  /** Calls back with each entry that the server refuses. Answers the function that stops it. */
  function listenToRefusals(listener: RefusalListener): () => void {
    refusalListeners.add(listener)
    return () => refusalListeners.delete(listener)
  }

  return { entries, waiting, refusals, unreachable, load, put, flush, retry, drop, listen, listenToRefusals }
})
