import { D, print } from '#shared/engine/decimal'
import { pourFieldOf } from '#shared/schemas/amendments'
import { viscosityCups } from '#shared/utils/viscosity-cups'
import { invalid } from '../utils/errors'

/** How the values of a field are written, and whether there may be none. */
interface Kind {
  form: RegExp
  message: string
  optional: boolean
  /** The one way to write a value, so that equal values are equal texts. */
  plain: (value: string) => string
}

const decimal = (value: string) => print(new D(value))
const asIs = (value: string) => value
const instant: Omit<Kind, 'optional'> = {
  form: /^(?:19[7-9]|20\d|21\d)\d-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{3}Z$/, message: 'Give an instant in UTC with milliseconds.', plain: (value) => new Date(value).toISOString(),
}
const id: Omit<Kind, 'optional'> = { form: /^[0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i, message: 'Choose one from the list.', plain: (value) => value.toLowerCase() }
const grams: Omit<Kind, 'optional'> = { form: /^\d{1,9}(?:\.\d{1,4})?$/, message: 'Give grams with a point and at most four decimals.', plain: decimal }
const celsius: Kind = { form: /^-?\d{1,3}(?:\.\d{1,2})?$/, message: 'Give degrees Celsius with a point and at most two decimals.', optional: true, plain: decimal }
const text = (most: number): Kind => ({ form: new RegExp(`^[^]{1,${most}}$`), message: `Use 1 to ${most} characters.`, optional: true, plain: asIs })

const kinds: Record<string, Kind> = {
  reactiveAt: { ...instant, optional: false },
  firstSprayAt: { ...instant, optional: false },
  lastSprayAt: { ...instant, optional: false },
  closedAt: { ...instant, optional: false },
  leftoverG: { ...grams, optional: true },
  gunId: { ...id, optional: true },
  boothId: { ...id, optional: true },
  mixedByUserId: { ...id, optional: false },
  purpose: text(200),
  airC: celsius,
  rhPct: { form: /^(?:100(?:\.0{1,4})?|\d{1,2}(?:\.\d{1,4})?)$/, message: 'Give a percentage from 0 to 100.', optional: true, plain: decimal },
  surfaceC: celsius,
  materialC: celsius,
  viscosityCup: { form: new RegExp(`^(?:${viscosityCups.join('|')})$`), message: 'Choose a cup.', optional: true, plain: asIs },
  viscositySeconds: { form: /^\d{1,4}(?:\.\d{1,2})?$/, message: 'Give seconds with at most two decimals.', optional: true, plain: decimal },
  note: text(500),
}

function kindOf(field: string): Kind {
  const pour = pourFieldOf(field)
  const kind = pour ? { ...(pour.what === 'grams' ? grams : id), optional: false } : kinds[field]
  if (!kind) throw invalid([{ path: 'field', message: 'This cannot be amended.' }])
  return kind
}

/** @returns the value in its one way of writing, or null where it is no value of this field */
export function plainValue(field: string, value: string | null): string | null {
  const kind = kindOf(field)
  return value === null || value === '' || !kind.form.test(value) || isNoInstant(kind, value) ? null : kind.plain(value)
}

/** @throws Refusal 400 beside `to` for what the field cannot hold */
export function checkedValue(field: string, value: string | null): string | null {
  const kind = kindOf(field)
  const wrong = (message: string) => invalid([{ path: 'to', message }])
  if (value === null || value === '') {
    if (kind.optional) return null
    throw wrong(kind.message)
  }
  if (!kind.form.test(value) || isNoInstant(kind, value)) throw wrong(kind.message)
  return kind.plain(value)
}

/** The form lets the 31st of February through. */
const isNoInstant = (kind: Kind, value: string): boolean => kind.message === instant.message && Number.isNaN(Date.parse(value))

/** Fields whose values are a person's own words; they stay out of the audit. */
export const isFreeText = (field: string): boolean => field === 'purpose' || field === 'note'
