import type { Knex } from 'knex'
import { createTable, mutable, optionalInstant, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'lots', (t) => {
    primaryId(t)
    uuid(t, 'material_id')
    t.string('lot_number', 60).notNullable()
    t.date('received_on').notNullable()
    t.date('expires_on').nullable()
    optionalInstant(t, 'opened_at')
    t.decimal('price_per_kg', 12, 4).nullable()
    t.string('place', 80).nullable()
    t.enum('state', ['sealed', 'in-use', 'empty', 'blocked']).notNullable().defaultTo('sealed')
    t.string('blocked_reason', 400).nullable()
    t.boolean('count_needed').notNullable().defaultTo(false)
    mutable(t)
    t.index(['material_id', 'state', 'expires_on'], 'ix_lots_offer')
    t.index(['lot_number'], 'ix_lots_lot_number')
    reference(t, 'lots', 'material_id', 'materials')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('lots')
}
