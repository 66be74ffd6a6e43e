import type * as z from 'zod/mini'
import { AmendmentBody } from '#shared/schemas/amendments'
import {
  Batch, BatchCloseBody, BatchCreateBody, BatchEventBody, BatchExportQuery, BatchFacets, BatchList, BatchListQuery, BatchParams, BatchReviewBody,
} from '#shared/schemas/batches'
import { BenchSnapshot } from '#shared/schemas/bench'
import { BoothChemistry, BoothCleanBody } from '#shared/schemas/booth-cleanings'
import { calculations } from '#shared/schemas/calculations'
import { ClimateCreateBody, ClimateList, ClimateListQuery, ClimateReading } from '#shared/schemas/climate'
import { IdParams } from '#shared/schemas/common'
import { Device, DeviceCreateBody, DeviceList, DeviceParams } from '#shared/schemas/devices'
import { Draft, DraftBody, DraftDiscardBody, DraftList, DraftListQuery, DraftParams } from '#shared/schemas/drafts'
import { Job, JobList, JobListQuery } from '#shared/schemas/jobs'
import { EventsQuery, LiveBooth, LiveQuery, LiveSnapshot, ServerTime } from '#shared/schemas/live'
import { Lot, LotCreateBody, LotList, LotListQuery, LotMovementBody, LotPatchBody, LotReasonBody } from '#shared/schemas/lots'
import { HazardStatementList, Material, MaterialCreateBody, MaterialList, MaterialListQuery, MaterialPatchBody } from '#shared/schemas/materials'
import { Mix, MixCreateBody, MixList, MixListQuery, MixPatchBody, MixQuery, MixRevisionBody } from '#shared/schemas/mixes'
import { NumberBlock, NumberBlockVoidBody } from '#shared/schemas/number-blocks'
import { OpenApiDocument } from '#shared/schemas/openapi'
import { OwnPasswordBody, PasswordResetBody, PersonCreateBody, PersonPatchBody } from '#shared/schemas/people'
import { Schedule, ScheduleList, ScheduleListQuery, ScheduleQuery } from '#shared/schemas/schedules'
import { Approval, ApprovalBody, Session, SignInBody } from '#shared/schemas/session'
import { Settings, SettingsPatchBody } from '#shared/schemas/settings'
import { Booth, BoothExtractionBody, BoothList, Gun, GunList, MixingCup, MixingCupList, PeopleList, Scale, ScaleList, ShopListQuery, User, UserList } from '#shared/schemas/shop'
import { BoothBody, BoothPatchBody, GunBody, GunPatchBody, MixingCupBody, MixingCupPatchBody, ScaleBody, ScalePatchBody } from '#shared/schemas/shop-edit'
import { Timer, TimerActionBody, TimerCreateBody, TimerExtendBody, TimerList, TimerListQuery, TimerSilenceBody } from '#shared/schemas/timers'
import type { Action } from '#shared/utils/permissions'

type Schema = z.ZodMiniType

/** What the document says of one route. */
export interface ApiRoute {
  method: 'get' | 'post' | 'put' | 'patch' | 'delete'
  /** With its parameters in braces: `/api/lots/{id}`. */
  path: string
  permission: Action | 'public'
  summary: string
  query?: Schema
  params?: Schema
  body?: Schema
  /** Null answers nothing (204); `stream` answers server-sent events, `csv` a table. */
  answer: Schema | 'stream' | 'csv' | null
  status: 200 | 201 | 204
  /** A POST that needs an Idempotency-Key. */
  idempotent: boolean
  /** Path of the file that serves it, where that is more general than `path`. */
  servedBy?: string
}

type Extra = Partial<Pick<ApiRoute, 'query' | 'params' | 'body' | 'status' | 'idempotent' | 'servedBy'>>
type Entry = [path: string, permission: ApiRoute['permission'], summary: string, answer: ApiRoute['answer'], extra?: Extra]

const get = (...[path, permission, summary, answer, extra]: Entry): ApiRoute =>
  ({ method: 'get', path, permission, summary, answer, status: 200, idempotent: false, ...extra })
const put = (...entry: Entry): ApiRoute => ({ ...get(...entry), method: 'put' })
const patch = (...entry: Entry): ApiRoute => ({ ...get(...entry), method: 'patch' })
const post = (...[path, permission, summary, answer, extra]: Entry): ApiRoute =>
  ({ method: 'post', path, permission, summary, answer, status: 201, idempotent: true, ...extra })
const remove = (...entry: Entry): ApiRoute => ({ ...get(...entry), method: 'delete', status: 204 })

const byId = { params: IdParams }

const calculationRoutes = Object.entries(calculations).map(([name, { body, answer }]) =>
  post(`/api/calculations/${name}`, 'calculations:run', `Works out: ${name.replace('-', ' ')}`, answer,
    { body, status: 200, idempotent: false, servedBy: '/api/calculations/{name}' }))

/** Every route under `/api`. A test holds it against the files. */
export const apiRoutes: readonly ApiRoute[] = [
  get('/api/session', 'public', 'Who this browser is', Session),
  post('/api/session', 'public', 'Signs in', Session, { body: SignInBody, idempotent: false }),
  remove('/api/session', 'public', 'Signs out', null),
  post('/api/session/password', 'password:change', 'Sets one\'s own password; every other session ends', Session, { body: OwnPasswordBody, status: 200, idempotent: false }),
  post('/api/approvals', 'approvals:create', 'A foreman allows one thing, once', Approval, { body: ApprovalBody }),
  get('/api/time', 'time:read', 'The shop\'s clock', ServerTime),
  get('/api/live', 'live:read', 'Pots, windows and alarms at one instant', LiveSnapshot, { query: LiveQuery }),
  get('/api/events', 'live:read', 'What happens, as it happens', 'stream', { query: EventsQuery }),
  get('/api/bench/snapshot', 'bench:read', 'All that a bench works from', BenchSnapshot),
  ...calculationRoutes,
  get('/api/batch-drafts', 'drafts:read', 'Batches being made', DraftList, { query: DraftListQuery }),
  get('/api/batch-drafts/{id}', 'drafts:read', 'A batch being made', Draft, { params: DraftParams }),
  put('/api/batch-drafts/{id}', 'drafts:write', 'Saves a batch being made', Draft, { params: DraftParams, body: DraftBody }),
  post('/api/batch-drafts/{id}/discard', 'drafts:write', 'Gives up a batch into whose cup nothing came and voids its number', Draft, { params: DraftParams, body: DraftDiscardBody, status: 200 }),
  post('/api/number-blocks', 'numbers:take', 'Numbers that a bench holds for work without network', NumberBlock),
  post('/api/number-blocks/{id}/void', 'numbers:void', 'Closes a block of numbers with a reason', NumberBlock, { ...byId, body: NumberBlockVoidBody, status: 200 }),
  get('/api/batches', 'batches:read', 'The log of batches', BatchList, { query: BatchListQuery }),
  post('/api/batches', 'batches:create', 'Seals a batch into the record', Batch, { body: BatchCreateBody }),
  get('/api/batches/facets', 'batches:search', 'What the log can be narrowed by', BatchFacets),
  get('/api/batches/export.csv', 'batches:search', 'The filtered log as a table', 'csv', { query: BatchExportQuery }),
  get('/api/batches/{id}', 'batches:read', 'A batch', Batch, { params: BatchParams }),
  post('/api/batches/{id}/events', 'batches:event', 'First or last spray of a gun, or the gun flushed', Batch, { params: BatchParams, body: BatchEventBody }),
  post('/api/batches/{id}/close', 'batches:close', 'A pot is emptied', Batch, { params: BatchParams, body: BatchCloseBody, status: 200 }),
  post('/api/batches/{id}/amendments', 'batches:amend', 'Puts one value right, with a reason', Batch, { params: BatchParams, body: AmendmentBody }),
  post('/api/batches/{id}/review', 'batches:review', 'A foreman settles what a batch was marked for', Batch, { params: BatchParams, body: BatchReviewBody }),
  get('/api/timers', 'timers:read', 'Timers', TimerList, { query: TimerListQuery }),
  post('/api/timers', 'timers:create', 'Sets a free timer', Timer, { body: TimerCreateBody }),
  post('/api/timers/{id}/silence', 'timers:silence', 'Ten minutes of quiet', Timer, { ...byId, body: TimerSilenceBody, status: 200 }),
  post('/api/timers/{id}/acknowledge', 'timers:acknowledge', 'Somebody has heard it', Timer, { ...byId, body: TimerActionBody, status: 200 }),
  post('/api/timers/{id}/extend', 'timers:create', 'Gives a free timer more time', Timer, { ...byId, body: TimerExtendBody, status: 200 }),
  post('/api/timers/{id}/done', 'timers:acknowledge', 'A timer has served', Timer, { ...byId, body: TimerActionBody, status: 200 }),
  get('/api/materials', 'materials:read', 'Materials with their stock', MaterialList, { query: MaterialListQuery }),
  get('/api/materials/{id}', 'materials:read', 'A material', Material, byId),
  get('/api/hazard-statements', 'materials:read', 'Statements of hazard and precaution, word for word', HazardStatementList),
  post('/api/materials', 'materials:write', 'Enters a material', Material, { body: MaterialCreateBody }),
  patch('/api/materials/{id}', 'materials:write', 'Changes a material, archives it or brings it back', Material, { ...byId, body: MaterialPatchBody }),
  remove('/api/materials/{id}', 'materials:write', 'Takes away a material that nothing refers to', null, byId),
  get('/api/lots', 'lots:read', 'Lots with their stock', LotList, { query: LotListQuery }),
  get('/api/lots/{id}', 'lots:read', 'A lot with all that came and went', Lot, byId),
  post('/api/lots', 'lots:create', 'Books a lot in', Lot, { body: LotCreateBody }),
  patch('/api/lots/{id}', 'lots:write', 'Puts right what was booked in', Lot, { ...byId, body: LotPatchBody }),
  post('/api/lots/{id}/movements', 'lots:write', 'Enters a count, more of the lot, or what was thrown away', Lot, { ...byId, body: LotMovementBody }),
  post('/api/lots/{id}/block', 'lots:write', 'Takes a lot from the benches', Lot, { ...byId, body: LotReasonBody, status: 200 }),
  post('/api/lots/{id}/release', 'lots:write', 'Gives a blocked lot back to the benches', Lot, { ...byId, body: LotReasonBody, status: 200 }),
  get('/api/mixes', 'mixes:read', 'Mixes', MixList, { query: MixListQuery }),
  get('/api/mixes/{id}', 'mixes:read', 'A mix with its revisions', Mix, { ...byId, query: MixQuery }),
  post('/api/mixes', 'mixes:write', 'Makes a mix with its first revision', Mix, { body: MixCreateBody }),
  patch('/api/mixes/{id}', 'mixes:write', 'Renames a mix, archives it or brings it back', Mix, { ...byId, body: MixPatchBody }),
  post('/api/mixes/{id}/revisions', 'mixes:write', 'Writes a mix\'s next revision', Mix, { ...byId, body: MixRevisionBody }),
  get('/api/schedules', 'schedules:read', 'Finishing schedules', ScheduleList, { query: ScheduleListQuery }),
  get('/api/schedules/{id}', 'schedules:read', 'A finishing schedule with the steps of a revision', Schedule, { ...byId, query: ScheduleQuery }),
  get('/api/jobs', 'jobs:read', 'Jobs, the one due first first', JobList, { query: JobListQuery }),
  get('/api/jobs/{id}', 'jobs:read', 'A job with pieces, steps and windows', Job, byId),
  get('/api/booths', 'shop:read', 'Booths', BoothList, { query: ShopListQuery }),
  get('/api/booths/{id}/chemistry', 'shop:read', 'What was sprayed in a booth since it was clean', BoothChemistry, byId),
  post('/api/booths/{id}/clean', 'booths:clean', 'Records a booth, its duct and filters as clean', BoothChemistry, { ...byId, body: BoothCleanBody }),
  post('/api/booths/{id}/extraction', 'booths:extraction', 'Whether the extraction of a booth runs', LiveBooth, { ...byId, body: BoothExtractionBody, status: 200 }),
  get('/api/people', 'people:read', 'Names of the people of the shop', PeopleList),
  get('/api/booths/{id}', 'shop:read', 'A booth, in use or not', Booth, byId),
  post('/api/booths', 'shop:write', 'Enters a booth', Booth, { body: BoothBody }),
  patch('/api/booths/{id}', 'shop:write', 'Changes a booth or takes it out of use', Booth, { ...byId, body: BoothPatchBody }),
  remove('/api/booths/{id}', 'shop:write', 'Takes a booth away that nothing refers to', null, byId),
  get('/api/guns', 'shop:read', 'Guns', GunList, { query: ShopListQuery }),
  get('/api/guns/{id}', 'shop:read', 'A gun, in use or not', Gun, byId),
  post('/api/guns', 'shop:write', 'Enters a gun', Gun, { body: GunBody }),
  patch('/api/guns/{id}', 'shop:write', 'Changes a gun or takes it out of use', Gun, { ...byId, body: GunPatchBody }),
  remove('/api/guns/{id}', 'shop:write', 'Takes a gun away that nothing refers to', null, byId),
  get('/api/scales', 'shop:read', 'Scales', ScaleList, { query: ShopListQuery }),
  get('/api/scales/{id}', 'shop:read', 'A scale, in use or not', Scale, byId),
  post('/api/scales', 'shop:write', 'Enters a scale', Scale, { body: ScaleBody }),
  patch('/api/scales/{id}', 'shop:write', 'Changes a scale or takes it out of use', Scale, { ...byId, body: ScalePatchBody }),
  remove('/api/scales/{id}', 'shop:write', 'Takes a scale away that nothing refers to', null, byId),
  get('/api/mixing-cups', 'shop:read', 'Mixing cups', MixingCupList, { query: ShopListQuery }),
  get('/api/mixing-cups/{id}', 'shop:read', 'A mixing cup, in use or not', MixingCup, byId),
  post('/api/mixing-cups', 'shop:write', 'Enters a mixing cup', MixingCup, { body: MixingCupBody }),
  patch('/api/mixing-cups/{id}', 'shop:write', 'Changes a mixing cup or takes it out of use', MixingCup, { ...byId, body: MixingCupPatchBody }),
  remove('/api/mixing-cups/{id}', 'shop:write', 'Takes a mixing cup away that nothing refers to', null, byId),
  get('/api/users', 'users:read', 'People', UserList, { query: ShopListQuery }),
  get('/api/users/{id}', 'users:read', 'A person', User, byId),
  post('/api/users', 'users:write', 'Enters a person with a first password', User, { body: PersonCreateBody }),
  patch('/api/users/{id}', 'users:write', 'Changes a person or takes the right to sign in away', User, { ...byId, body: PersonPatchBody }),
  post('/api/users/{id}/password', 'users:write', 'Gives a person a new first password', User, { ...byId, body: PasswordResetBody, status: 200 }),
  get('/api/settings', 'settings:read', 'What holds for the whole shop', Settings),
  patch('/api/settings', 'settings:write', 'Changes what holds for the whole shop', Settings, { body: SettingsPatchBody }),
  get('/api/devices', 'devices:read', 'Enrolled benches and screens', DeviceList),
  post('/api/devices', 'devices:write', 'Makes this browser a bench or a screen', Device, { body: DeviceCreateBody }),
  remove('/api/devices/{id}', 'devices:write', 'Takes a bench\'s or screen\'s right away', null, { params: DeviceParams }),
  get('/api/climate-readings', 'climate:read', 'Climate of the booths', ClimateList, { query: ClimateListQuery }),
  post('/api/climate-readings', 'climate:write', 'Notes a reading', ClimateReading, { body: ClimateCreateBody }),
  get('/api/openapi.json', 'public', 'This document', OpenApiDocument),
]
