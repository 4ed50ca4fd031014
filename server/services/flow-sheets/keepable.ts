/** What was read as a database can keep it: text without NUL and halves of characters, wherever in it. */
export function keepable<Value>(value: Value): Value {
  return JSON.parse(JSON.stringify(value), (_key, one: unknown) => typeof one === 'string' ? one.replaceAll('\0', '').toWellFormed() : one) as Value
}
