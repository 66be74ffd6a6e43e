import type { Knex } from 'knex'
import { createTable, grams, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'batch_components', (t) => {
    uuid(t, 'batch_id')
    t.specificType('component_index', 'tinyint unsigned').notNullable()
    uuid(t, 'material_id')
    t.enum('role', ['base', 'hardener', 'thinner', 'additive', 'accelerator', 'peroxide']).notNullable()
    t.decimal('parts', 12, 4).notNullable()
    grams(t, 'planned_g').notNullable()
    grams(t, 'target_g').notNullable()
    grams(t, 'poured_g').notNullable()
    t.decimal('deviation_pct', 12, 4).nullable()
    t.enum('verdict', ['short', 'in-tolerance', 'too-much', 'cannot-tell']).nullable()
    t.primary(['batch_id', 'component_index'])
    t.index(['material_id', 'batch_id'], 'ix_batch_components_material')
    reference(t, 'batch_components', 'batch_id', 'batches')
    reference(t, 'batch_components', 'material_id', 'materials')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('batch_components')
}
