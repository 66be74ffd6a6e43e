import { openDB, type DBSchema, type IDBPDatabase } from 'idb'
import type { BenchSnapshot } from '#shared/schemas/bench'
import type { OutboxEntry } from '#shared/utils/bench-outbox'
import { newUuid } from '#shared/utils/uuid'
import type { BenchNumbers } from '#shared/utils/bench-numbers'
import type { BenchPot } from '#shared/utils/bench-reckon'
import type { BenchAside } from '#shared/utils/bench-refusal'
import type { BenchRun } from '#shared/utils/bench-run'
import type { BenchSetup } from '#shared/utils/bench-setup'

/** The pots of one plan, kept until the last of them is mixed. */
export interface BenchPlanKept {
  id: string
  setup: BenchSetup
  pots: BenchPot[]
}

/** What the bench must find again after a reload or a crash. */
interface BenchKept {
  userId: string
  setup: BenchSetup
  plan: BenchPlanKept | null
  run: BenchRun | null
  /** How often the batch at hand has changed tablets; this one holds it with this turn. */
  turn: number
}

interface BenchSnapshotKept {
  snapshot: BenchSnapshot
  /** By the server's clock, epoch ms. */
  at: number
  /** The server's clock less this tablet's, ms. */
  offsetMs: number | null
}

interface BenchDb extends DBSchema {
  bench: { key: 'kept', value: BenchKept }
  snapshot: { key: 'last', value: BenchSnapshotKept }
  outbox: { key: string, value: OutboxEntry, indexes: { createdAt: number } }
  /** What belongs to the tablet, whoever works at it. */
  tablet: { key: 'id', value: string }
  numbers: { key: 'block', value: BenchNumbers }
  aside: { key: string, value: BenchAside }
}

let opened: Promise<IDBPDatabase<BenchDb>> | null = null

function database(): Promise<IDBPDatabase<BenchDb>> {
  opened ??= openDB<BenchDb>('potbell-bench', 3, {
    upgrade(db, from) {
      db.createObjectStore('aside', { keyPath: 'id' })
      if (from >= 2) return
      db.createObjectStore('tablet')
      db.createObjectStore('numbers')
      if (from >= 1) return
      db.createObjectStore('bench')
      db.createObjectStore('snapshot')
      db.createObjectStore('outbox', { keyPath: 'id' }).createIndex('createdAt', 'createdAt')
    },
    // A newer page in another tab waits for this one to let go; the next call here opens it anew.
    blocking(_mine, _theirs, event) {
      opened = null
      ;(event.target as IDBDatabase).close()
    },
  }).catch((error: unknown) => {
    // A disk that could not be opened once is tried again at the next call.
    opened = null
    throw error
  })
  return opened
}

/** The store keeps proxies; the disk takes plain data only. */
const plain = <T>(value: T): T => JSON.parse(JSON.stringify(value)) as T

/** The tablet's own disk. Everything the bench must not lose is written here before it is sent anywhere. */
export function useBenchDisk() {
  return {
    readKept: async (): Promise<BenchKept | undefined> => (await database()).get('bench', 'kept'),
    writeKept: async (kept: BenchKept): Promise<void> => {
      const trx = (await database()).transaction('bench', 'readwrite')
      void trx.store.put(plain(kept), 'kept')
      // A page that goes would take an open transaction with it; a committed one is out of its hands.
      trx.commit()
      await trx.done
    },
    readSnapshot: async (): Promise<BenchSnapshotKept | undefined> => (await database()).get('snapshot', 'last'),
    writeSnapshot: async (kept: BenchSnapshotKept): Promise<void> => {
      await (await database()).put('snapshot', plain(kept), 'last')
    },
    /** The tablet's own name for itself, made once. */
    readTabletId: async (): Promise<string> => {
      const trx = (await database()).transaction('tablet', 'readwrite')
      const known = await trx.store.get('id')
      const id = known ?? newUuid()
      if (known === undefined) await trx.store.put(id, 'id')
      await trx.done
      return id
    },
    readNumbers: async (): Promise<BenchNumbers | undefined> => (await database()).get('numbers', 'block'),
    writeNumbers: async (numbers: BenchNumbers): Promise<void> => {
      await (await database()).put('numbers', plain(numbers), 'block')
    },
    readAside: async (): Promise<BenchAside[]> => (await database()).getAll('aside'),
    writeAside: async (aside: BenchAside): Promise<void> => {
      await (await database()).put('aside', plain(aside))
    },
    dropAside: async (id: string): Promise<void> => {
      await (await database()).delete('aside', id)
    },
    readOutbox: async (): Promise<OutboxEntry[]> => (await database()).getAllFromIndex('outbox', 'createdAt'),
    /** Puts what changed and removes what went, in one transaction. */
    writeOutbox: async (puts: readonly OutboxEntry[], removes: readonly string[]): Promise<void> => {
      const trx = (await database()).transaction('outbox', 'readwrite')
      await Promise.all([...puts.map(entry => trx.store.put(plain(entry))), ...removes.map(id => trx.store.delete(id)), trx.done])
    },
  }
}
