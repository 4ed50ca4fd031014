import type { Attribute } from '@tiptap/core'

/** An attribute of one of our blocks, carried through the clipboard as `data-<name>`; `read` makes of its text what the document holds. */
export function dataAttribute<Value>(name: string, absent: Value, read: (text: string) => unknown = text => text): Partial<Attribute> {
  return {
    default: absent,
    parseHTML: (element) => {
      const text = element.getAttribute(`data-${name}`)
      return text === null ? absent : read(text)
    },
    renderHTML: attributes => attributes[name] === null ? {} : { [`data-${name}`]: String(attributes[name]) },
  }
}
