import type { Knex } from 'knex'
import { createTable, percent, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'mix_components', (t) => {
    primaryId(t)
    uuid(t, 'mix_revision_id')
    t.specificType('position', 'tinyint unsigned').notNullable()
    uuid(t, 'material_id')
    t.enum('role', ['base', 'hardener', 'thinner', 'additive', 'accelerator', 'peroxide']).notNullable()
    t.decimal('parts', 12, 4).notNullable()
    t.decimal('parts_max', 12, 4).nullable()
    percent(t, 'tolerance_pct').nullable()
    t.boolean('reactive').notNullable().defaultTo(false)
    t.unique(['mix_revision_id', 'position'], { indexName: 'uq_mix_components_position' })
    reference(t, 'mix_components', 'mix_revision_id', 'mix_revisions')
    reference(t, 'mix_components', 'material_id', 'materials')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('mix_components')
}
