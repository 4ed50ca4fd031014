import { PayError } from './pay-error'

export type FormValue = string | FormValue[] | { [name: string]: FormValue }
export type Form = { [name: string]: FormValue }

/** A form whose names have brackets: `line_items[0][quantity]=1` is `{ line_items: [{ quantity: '1' }] }`. */
export function readForm(text: string): Form {
  const form: Form = {}
  for (const [name, value] of new URLSearchParams(text)) {
    const path = [...name.matchAll(/^[^[\]]+|\[([^[\]]*)\]/g)].map(([whole, inside]) => inside ?? whole)
    if (path.length === 0 || path.some(part => part === '__proto__')) throw new PayError(400, 'invalid_request_error', `Invalid parameter name: ${name}`)
    put(form, path, value)
  }
  return listed(form) as Form
}

function put(into: { [name: string]: FormValue }, [first = '', ...rest]: string[], value: string): void {
  const name = first === '' ? String(Object.keys(into).length) : first
  if (rest.length === 0) {
    into[name] = value
    return
  }
  const inside = into[name]
  const next = typeof inside === 'object' && !Array.isArray(inside) ? inside : {}
  into[name] = next
  put(next, rest, value)
}

/** Members named 0, 1, 2 are a list. */
function listed(value: FormValue): FormValue {
  if (typeof value === 'string' || Array.isArray(value)) return value
  const entries = Object.entries(value).map(([name, member]) => [name, listed(member)] as const)
  return entries.length > 0 && entries.every(([name], index) => name === String(index)) ? entries.map(([, member]) => member) : Object.fromEntries(entries)
}
