import type { Knex } from 'knex'

const uuidType = 'CHAR(36) CHARACTER SET ascii COLLATE ascii_bin'

export async function up(knex: Knex): Promise<void> {
  await knex.raw(`ALTER TABLE batch_current MODIFY mixed_by_user_id ${uuidType} NOT NULL, MODIFY poured_total_g DECIMAL(14, 4) NOT NULL`)
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw(`ALTER TABLE batch_current MODIFY mixed_by_user_id ${uuidType} NULL, MODIFY poured_total_g DECIMAL(14, 4) NULL`)
}
