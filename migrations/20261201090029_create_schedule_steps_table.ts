import type { Knex } from 'knex'
import { celsius, createTable, minutes, optionalUuid, primaryId, reference, uuid } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'schedule_steps', (t) => {
    primaryId(t)
    uuid(t, 'schedule_revision_id')
    t.specificType('position', 'smallint unsigned').notNullable()
    t.enum('kind', ['prepare', 'coat', 'sand', 'wait', 'inspect']).notNullable()
    t.string('title', 120).notNullable()
    t.string('grit', 12).nullable()
    optionalUuid(t, 'mix_id')
    t.decimal('film_weight_min_gsm', 10, 3).nullable()
    t.decimal('film_weight_gsm', 10, 3).nullable()
    t.decimal('film_weight_max_gsm', 10, 3).nullable()
    t.enum('film_weight_is', ['deposited', 'sprayed']).nullable()
    t.specificType('coats', 'tinyint unsigned').nullable()
    t.specificType('passes', 'tinyint unsigned').nullable()
    t.enum('faces', ['front', 'back', 'both', 'edges', 'all']).nullable()
    t.enum('gun_shape', ['flat', 'frames', 'sticks']).nullable()
    t.decimal('max_pressure_bar', 6, 2).nullable()
    minutes(t, 'coat_interval_min_min').nullable()
    minutes(t, 'coat_interval_max_min').nullable()
    minutes(t, 'overcoat_from_min').nullable()
    minutes(t, 'overcoat_until_min').nullable()
    minutes(t, 'sand_from_min').nullable()
    minutes(t, 'sand_until_min').nullable()
    minutes(t, 'flash_off_min').nullable()
    minutes(t, 'dry_min').nullable()
    t.string('dry_place', 40).nullable()
    celsius(t, 'dry_at_c').nullable()
    t.boolean('lay_flat').notNullable().defaultTo(false)
    t.boolean('do_not_sand').notNullable().defaultTo(false)
    t.boolean('keep_from_draughts').notNullable().defaultTo(false)
    t.string('cautions', 1000).nullable()
    t.string('instructions', 2000).nullable()
    t.unique(['schedule_revision_id', 'position'], { indexName: 'uq_schedule_steps_position' })
    reference(t, 'schedule_steps', 'schedule_revision_id', 'schedule_revisions')
    reference(t, 'schedule_steps', 'mix_id', 'mixes')
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('schedule_steps')
}
