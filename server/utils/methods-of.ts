/** Methods an address takes by the API's description, in capitals; none when it is no address of the API. */
export function methodsOf(paths: Record<string, object>, address: string): string[] {
  const [path = ''] = address.split('?')
  const asked = path.replace(/\/+$/, '').split('/')
  for (const [template, operations] of Object.entries(paths)) {
    const parts = template.split('/')
    if (parts.length === asked.length && parts.every((part, index) => part === asked[index] || (/^\{.+\}$/.test(part) && asked[index] !== ''))) {
      return Object.keys(operations).map(method => method.toUpperCase())
    }
  }
  return []
}
