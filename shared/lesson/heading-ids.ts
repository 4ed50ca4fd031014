import { Extension } from '@tiptap/core'

/** Gives headings the address they are opened at. It is set when a lesson is saved (`withHeadingIds`) and stays when the words change. */
export const HeadingIds = Extension.create({
  name: 'headingIds',
  addGlobalAttributes: () => [{
    types: ['heading'],
    attributes: { id: { default: null, keepOnSplit: false, parseHTML: element => element.getAttribute('id'), renderHTML: attributes => attributes.id ? { id: attributes.id } : {} } },
  }],
})
