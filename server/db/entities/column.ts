import { JsonType, p } from '@mikro-orm/core'

/** Primary key made by the application, so that it is known before the insert. */
export const id = () => p.uuid().primary().onCreate(() => crypto.randomUUID())

/** 8-byte column typed as a number; `p.float()` alone makes a 4-byte one in PostgreSQL. */
export const real = () => p.float().columnType('double precision')

/** An instant, kept with its zone. */
export const instant = () => p.datetime().columnType('timestamptz')

/** The ORM otherwise writes every JSON it loads out again, to compare it at the next flush: longer than all the rest of a request. What is written once is never found changed. */
class WriteOnceJson extends JsonType {
  override ensureComparable() {
    return false
  }

  override compareValues() {
    return true
  }
}

/** JSON that is written with its row and never changed. */
export const jsonOnce = <Value>() => p.type(WriteOnceJson).$type<Value>().trackChanges(false)
