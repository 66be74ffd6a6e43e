import type { Knex } from 'knex'
import { chemistryRules } from '#shared/reference/chemistry-rules'
import { hazardStatements } from '#shared/reference/hazard-statements'
import { newId } from '../server/utils/ids'

/** One row of the table of rules; a rule that holds both ways round becomes two, so that a pair is found as it comes. */
interface RuleRow {
  first_chemistry: string
  second_chemistry: string
  scope: string
  verdict: string
  advice: string
}

function ruleRows(): RuleRow[] {
  return chemistryRules.flatMap(({ first, second, scope, verdict, advice, ordered }) => {
    const row = { first_chemistry: first, second_chemistry: second, scope, verdict, advice }
    return ordered || first === second ? [row] : [row, { ...row, first_chemistry: second, second_chemistry: first }]
  })
}

/**
 * Brings the tables that nobody edits in the product up to date: statements of hazard and precaution, rules of chemistry.
 * Safe to run again; what is there keeps its identity.
 *
 * @param admin connection that may write these tables; the application's own may only read them
 */
export async function seedReference(admin: Knex): Promise<void> {
  await admin.transaction(async (trx) => {
    await trx('hazard_statements').insert(hazardStatements.map(({ code, kind, text }) => ({ code, kind, text })))
      .onConflict('code').merge(['kind', 'text'])
    await trx('chemistry_rules').insert(ruleRows().map(row => ({ id: newId(), ...row })))
      .onConflict(['first_chemistry', 'second_chemistry', 'scope']).merge(['verdict', 'advice'])
  })
}
