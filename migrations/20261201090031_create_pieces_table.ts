import type { Knex } from 'knex'
import { createTable, mutable, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'pieces', (t) => {
    primaryId(t)
    uuid(t, 'job_id')
    t.specificType('position', 'smallint unsigned').notNullable()
    t.string('label', 80).notNullable()
    t.decimal('length_mm', 10, 2).notNullable()
    t.decimal('width_mm', 10, 2).notNullable()
    t.decimal('thickness_mm', 8, 2).nullable()
    t.integer('quantity').unsigned().notNullable()
    t.enum('faces', ['front', 'back', 'both', 'edges', 'all']).notNullable()
    t.decimal('area_m2', 14, 6).notNullable()
    t.string('rack', 40).nullable()
    t.string('held_reason', 400).nullable()
    mutable(t)
    t.unique(['job_id', 'position'], { indexName: 'uq_pieces_position' })
    reference(t, 'pieces', 'job_id', 'jobs')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('pieces')
}
