import type { Knex } from 'knex'

const kinds = (more: string[]) => ['first-spray', 'last-spray', 'emptied', 'review-settled', 'note', ...more].map((kind) => `'${kind}'`).join(', ')

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`ALTER TABLE batch_events MODIFY kind ENUM(${kinds(['gun-flushed'])}) NOT NULL`)
}

export async function down(knex: Knex): Promise<void> {
  // The narrower list has no word for it; what was done stays readable as a note.
  await knex('batch_events').where({ kind: 'gun-flushed' }).update({ kind: 'note' })
  await knex.raw(`ALTER TABLE batch_events MODIFY kind ENUM(${kinds([])}) NOT NULL`)
}
