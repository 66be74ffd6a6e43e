import type { Knex } from 'knex'
import { createTable, grams, instant, mutable, optionalInstant, optionalUuid, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'batch_current', (t) => {
    uuid(t, 'batch_id').primary()
    t.enum('state', ['fresh', 'closing', 'life-up', 'emptied', 'stopped', 'no-pot-life']).notNullable()
    instant(t, 'mixed_at')
    optionalUuid(t, 'booth_id')
    optionalInstant(t, 'reactive_at')
    optionalInstant(t, 'late_at')
    optionalInstant(t, 'ends_at')
    optionalInstant(t, 'first_spray_at')
    optionalInstant(t, 'last_spray_at')
    optionalInstant(t, 'closed_at')
    grams(t, 'leftover_g').nullable()
    t.boolean('leftover_weighed').nullable()
    t.string('disposal', 60).nullable()
    t.string('used', 12).nullable()
    t.decimal('worst_deviation_pct', 12, 4).nullable()
    t.boolean('out_of_tolerance').notNullable().defaultTo(false)
    t.boolean('corrected').notNullable().defaultTo(false)
    t.boolean('review_open').notNullable().defaultTo(false)
    t.boolean('amended').notNullable().defaultTo(false)
    mutable(t)
    t.index(['state', 'mixed_at', 'batch_id'], 'ix_batch_current_state')
    t.index(['review_open', 'mixed_at', 'batch_id'], 'ix_batch_current_review')
    reference(t, 'batch_current', 'batch_id', 'batches')
    reference(t, 'batch_current', 'booth_id', 'booths')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('batch_current')
}
