/**
 * Every table of the project and what the application's database user may do with it.
 *
 * `record`: what happened; never changed, so INSERT and SELECT only. `mutable`: present state.
 * `erasable`: present state whose rows may go (keys that expire, limits, sessions, what can be made anew from the record).
 * `removable`: what a person may take away again while nothing refers to it; the foreign keys hold everything else.
 * `reference`: read only.
 * A table that stands in no list fails a test, so that nobody forgets to decide.
 */
export const tables = {
  record: [
    'amendments',
    'application_batches',
    'application_pieces',
    'applications',
    'audit_entries',
    'batch_components',
    'batch_events',
    'batch_pieces',
    'batch_pours',
    'batches',
    'booth_cleanings',
    'booth_extraction_changes',
    'events',
    'lot_events',
    'lot_movements',
    'mix_components',
    'mix_revisions',
    'voided_numbers',
    'waste_entries',
  ],
  mutable: [
    'application_current',
    'approvals',
    'batch_current',
    'batch_drafts',
    'climate_readings',
    'devices',
    'job_steps',
    'jobs',
    'ledger_head',
    'lots',
    'mixes',
    'number_blocks',
    'number_series',
    'pieces',
    'schedule_revisions',
    'schedule_steps',
    'schedules',
    'settings',
    'timers',
    'users',
  ],
  erasable: ['batch_uses', 'idempotency_keys', 'sessions', 'sign_in_limits'],
  removable: ['booths', 'guns', 'materials', 'mixing_cups', 'scales'],
  reference: ['chemistry_rules', 'hazard_statements', 'knex_migrations'],
} as const

export type TableKind = keyof typeof tables

export const privileges: Record<TableKind, string> = {
  record: 'SELECT, INSERT',
  mutable: 'SELECT, INSERT, UPDATE',
  erasable: 'SELECT, INSERT, UPDATE, DELETE',
  removable: 'SELECT, INSERT, UPDATE, DELETE',
  reference: 'SELECT',
}
