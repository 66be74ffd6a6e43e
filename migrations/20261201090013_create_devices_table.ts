import type { Knex } from 'knex'
import { createTable, hash, mutable, optionalInstant, optionalUuid, primaryId, reference } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'devices', (t) => {
    primaryId(t)
    t.enum('kind', ['bench', 'screen']).notNullable()
    t.string('name', 60).notNullable()
    optionalUuid(t, 'booth_id')
    optionalUuid(t, 'scale_id')
    hash(t, 'token_hash')
    optionalInstant(t, 'last_seen_at')
    optionalInstant(t, 'revoked_at')
    mutable(t)
    t.unique(['token_hash'], { indexName: 'uq_devices_token_hash' })
    reference(t, 'devices', 'booth_id', 'booths')
    reference(t, 'devices', 'scale_id', 'scales')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('devices')
}
