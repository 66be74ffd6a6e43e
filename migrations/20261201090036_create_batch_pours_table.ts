import type { Knex } from 'knex'
import { createTable, grams, instant, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'batch_pours', (t) => {
    primaryId(t)
    uuid(t, 'batch_id')
    t.specificType('component_index', 'tinyint unsigned').notNullable()
    t.specificType('position', 'smallint unsigned').notNullable()
    uuid(t, 'lot_id')
    grams(t, 'grams').notNullable()
    instant(t, 'at')
    t.enum('source', ['typed', 'scale', 'simulated', 'bridge']).notNullable()
    t.specificType('round', 'tinyint unsigned').notNullable()
    t.unique(['batch_id', 'component_index', 'position'], { indexName: 'uq_batch_pours_position' })
    t.index(['lot_id', 'batch_id'], 'ix_batch_pours_lot')
    reference(t, 'batch_pours', 'batch_id', 'batches')
    reference(t, 'batch_pours', 'lot_id', 'lots')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('batch_pours')
}
