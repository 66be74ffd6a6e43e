import type { PersonCreateBody, PersonPatchBody, PasswordResetBody } from '#shared/schemas/people'
import type { User } from '#shared/schemas/shop'
import {
  endSessionsOf, findPerson, holdManagers, insertPerson, updatePassword, updatePerson, type Person, type PersonFacts,
} from '../repositories/people'
import { holdThing } from '../repositories/shop-write'
import { versionConflict, uniquely } from '../utils/conflict'
import type { Context } from '../utils/context'
import { notFound, ruleBroken } from '../utils/errors'
import { newId } from '../utils/ids'
import { hashSecret } from '../utils/password'
import { mutate, type Mutation } from '../utils/transactions'
import { sessionEnded } from './sessions'
import { shopDay, withTraining } from './shop'

/** What is told where it is there already. */
const taken = ['email', 'Somebody has this address already, perhaps one who was taken out of use.'] as const

/**
 * Enters a person with a first password, which has to be changed at the first sign-in.
 *
 * @throws Refusal 409 when the address is taken
 */
export async function createPerson(ctx: Context, { password, ...facts }: PersonCreateBody): Promise<User> {
  const [passwordHash, { today }] = await Promise.all([hashSecret(password), shopDay(ctx)])
  return mutate(ctx, async (m) => {
    const id = newId()
    await uniquely(...taken, () => insertPerson(id, facts, passwordHash, m.now, m.trx))
    m.audit({ action: 'user.created', subject: `user:${id}`, facts: { role: facts.role, isocyanateTrainingUntil: facts.isocyanateTrainingUntil } })
    m.publish(told(id))
    return withTraining(await present(id, m), today)
  })
}

/**
 * Changes the fields that are sent; `active: false` keeps a person from signing in. A new role and taking out of use end
 * the person's sessions at once, in every process.
 *
 * @throws Refusal 404, 409 `version-conflict`, 409 when the address is taken, 422 `last-manager`
 */
export async function changePerson(ctx: Context, id: string, { version, active, ...fields }: PersonPatchBody): Promise<User> {
  const { today } = await shopDay(ctx)
  return mutate(ctx, async (m) => {
    const managers = await holdManagers(m.trx)
    await holdThing('users', id, m.trx)
    const before = await present(id, m)
    if (before.version !== version) throw await versionConflict(withTraining(before, today), `user:${id}`, m.trx)
    const after: PersonFacts = { ...factsOf(before), ...given(fields) }
    const stays = active ?? before.active
    if (managers.length === 1 && managers[0] === id) requireManager(after.role, stays)
    await uniquely(...taken, () => updatePerson(id, after, stays, m.now, m.trx))
    const reason = before.active && !stays ? 'disabled' : before.role === after.role ? null : 'role-changed'
    const ended = reason === null ? [] : await endAll(m, id, reason)
    m.audit({ action: 'user.changed', subject: `user:${id}`, facts: { ...changesOf(before, after, stays), endedSessions: ended } })
    m.publish(told(id))
    return withTraining(await present(id, m), today)
  })
}

/**
 * Gives somebody a new first password; their sessions end at once. One's own is changed by `changeOwnPassword`.
 *
 * @throws Refusal 404, 422 `own-password`
 */
export async function resetPassword(ctx: Context, id: string, { password }: PasswordResetBody): Promise<User> {
  if (ctx.principal.user?.id === id) throw ruleBroken('own-password', 'Your own password is changed on your own page.')
  const [passwordHash, { today }] = await Promise.all([hashSecret(password), shopDay(ctx)])
  return mutate(ctx, async (m) => {
    if ((await updatePassword(id, passwordHash, true, m.now, m.trx)) === 0) throw notFound('The person')
    const ended = await endAll(m, id, 'password-reset')
    m.audit({ action: 'user.password-reset', subject: `user:${id}`, facts: { endedSessions: ended } })
    return withTraining(await present(id, m), today)
  })
}

async function present(id: string, { trx }: Mutation): Promise<Person> {
  const person = await findPerson(id, trx)
  if (person === null) throw notFound('The person')
  return person
}

const factsOf = ({ name, initials, email, role, isocyanateTrainingUntil }: Person): PersonFacts =>
  ({ name, initials, email, role, isocyanateTrainingUntil })

/** Only what was sent: a member that is not there must not clear what stands. */
function given(fields: Partial<PersonFacts> | Record<string, unknown>): Partial<PersonFacts> {
  return Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== undefined)) as Partial<PersonFacts>
}

/** @throws Refusal 422 when nobody would be left who can enter people */
function requireManager(role: User['role'], active: boolean): void {
  const message = 'This is the last manager who can sign in. Make somebody else manager first.'
  if (!active) throw ruleBroken('last-manager', message, [{ path: 'active', message }])
  if (role !== 'manager') throw ruleBroken('last-manager', message, [{ path: 'role', message }])
}

async function endAll(m: Mutation, userId: string, reason: string): Promise<number> {
  const ended = await endSessionsOf(userId, reason, m.now, m.trx)
  for (const id of ended) m.publish(sessionEnded(id))
  return ended.length
}

/** Role and training as they were and are; of names and addresses only that they changed. */
function changesOf(before: Person, after: PersonFacts, active: boolean) {
  const named = (['name', 'initials', 'email'] as const).filter((key) => before[key] !== after[key])
  return {
    changed: named,
    from: { role: before.role, active: before.active, isocyanateTrainingUntil: before.isocyanateTrainingUntil },
    to: { role: after.role, active, isocyanateTrainingUntil: after.isocyanateTrainingUntil },
  }
}

const told = (id: string) => ({ type: 'shop', subject: `user:${id}`, boothId: null, payload: { id } })
