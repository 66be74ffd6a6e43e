import type { Knex } from 'knex'
import { createTable, mutable, primaryId } from '../server/database/columns'

export async function up(knex: Knex): Promise<void> {
  await createTable(knex, 'users', (t) => {
    primaryId(t)
    t.string('email', 254).notNullable()
    t.string('name', 120).notNullable()
    t.string('initials', 4).notNullable()
    t.enum('role', ['sprayer', 'foreman', 'manager']).notNullable()
    t.string('password_hash', 255).nullable()
    t.boolean('demo_password').notNullable().defaultTo(false)
    t.string('pin_hash', 255).nullable()
    t.date('isocyanate_training_until').nullable()
    t.boolean('active').notNullable().defaultTo(true)
    mutable(t)
    t.unique(['email'], { indexName: 'uq_users_email' })
  })
}

export async function down(knex: Knex): Promise<void> {
  await knex.schema.dropTable('users')
}
