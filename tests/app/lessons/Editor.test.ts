import { mountSuspended } from '@nuxt/test-utils/runtime'
import { expect, it, vi } from 'vitest'
import type { Editor as TiptapEditor } from '@tiptap/vue-3'
import Editor from '~/components/lessons/Editor.client.vue'
import { checkDocument } from '#shared/lesson/check-document'
import type { LessonDocument, LessonNode } from '#shared/contract/lesson-document'

const words = (text: string): LessonNode => ({ type: 'paragraph', content: [{ type: 'text', text }] })
const film = '11111111-1111-4111-8111-111111111111'
const whole: LessonDocument = { type: 'doc', content: [
  { type: 'heading', attrs: { level: 2, id: 'walls' }, content: [{ type: 'text', text: 'Walls' }] },
  words('The water is behind the bowl.'),
  { type: 'caution', content: [words('Eyes on.')] },
  { type: 'limit', attrs: { criterion: 'W-01' } },
  { type: 'figure', attrs: { asset: null, drawing: 'bowl-curve', alt: '', caption: '' } },
  { type: 'steps', content: [{ type: 'step', attrs: { cannotBeUndone: true }, content: [words('Blend.')] }, { type: 'step', attrs: { cannotBeUndone: false }, content: [words('Wipe.')] }] },
  { type: 'clip', attrs: { asset: film, start: 0, end: 20, caption: 'The ball' } },
] }

async function editing(document: LessonDocument) {
  const wrapper = await mountSuspended(Editor, { attachTo: globalThis.document.body, props: { document, generation: 1, criteria: [{ id: 'W-01', title: 'Seat land after bowl work', stage: 'Op 70, Bowl' }, { id: 'P-02', title: 'Pushrod wall', stage: 'Op 110, Port walls' }], media: {}, findMedia: async () => [] } })
  const held = wrapper.vm as unknown as { editor: TiptapEditor, jump: (path: string) => boolean }
  await vi.waitFor(() => expect(wrapper.find('.lesson-sheet').exists()).toBe(true))
  const editor = held.editor
  const last = () => (wrapper.emitted('change')?.at(-1)?.[0] as LessonDocument | undefined) ?? null
  const press = (word: string) => wrapper.findAll('[role="toolbar"] button').find(button => button.text() === word)!.trigger('click')
  return { wrapper, editor, last, press, jump: held.jump }
}

it('opens every block of a lesson and changes nothing by itself', async () => {
  const { wrapper, editor } = await editing(whole)
  for (const label of ['Caution', 'Limit', 'Picture', 'Steps', 'Clip']) expect(wrapper.find(`.lesson-sheet [aria-label="${label}"]`).exists(), label).toBe(true)
  expect(wrapper.text()).toContain('Seat land after bowl work')
  expect(wrapper.emitted('change')).toBeUndefined()
  expect(editor.getJSON().content?.slice(0, whole.content!.length)).toEqual(whole.content)
})

it('gives back what the server takes, whatever is put in', async () => {
  const { wrapper, editor, last, press } = await editing({ type: 'doc', content: [words('Start.')] })
  editor.commands.focus('end')
  await press('Steps')
  await press('Table')
  await vi.waitFor(() => expect(last()?.content?.length).toBeGreaterThan(1))
  editor.commands.focus('end')
  await press('• List')
  const { document, issues } = checkDocument(last())
  expect(issues).toBeNull()
  const types = new Set<string>()
  const visit = (node: LessonNode): void => {
    types.add(node.type)
    node.content?.forEach(visit)
  }
  visit(document!)
  expect([...types]).toEqual(expect.arrayContaining(['steps', 'step', 'table', 'tableHeader', 'bulletList']))
  expect(wrapper.emitted('change')!.length).toBeGreaterThan(1)
})

it('marks a stroke as one that cannot be undone, and does not pass that on to the next stroke', async () => {
  const { wrapper, editor, last } = await editing({ type: 'doc', content: [{ type: 'steps', content: [{ type: 'step', attrs: { cannotBeUndone: false }, content: [words('Blend.')] }] }] })
  const tick = wrapper.get('.lesson-sheet input[type="checkbox"]')
  ;(tick.element as HTMLInputElement).checked = true
  await tick.trigger('change')
  expect(last()?.content?.[0]?.content?.[0]?.attrs).toEqual({ cannotBeUndone: true })
  editor.commands.setTextSelection(9)
  editor.commands.keyboardShortcut('Enter')
  expect(last()?.content?.[0]?.content?.map(step => step.attrs?.cannotBeUndone)).toEqual([true, false])
})

it('puts in a limit chosen by its title', async () => {
  const { wrapper, last, press } = await editing({ type: 'doc', content: [words('Start.')] })
  await press('Limit')
  const dialog = wrapper.findAll('dialog').find(one => one.text().includes('Limit from the rubric'))!
  await dialog.get('input:not([type="radio"])').setValue('pushrod')
  expect(dialog.findAll('label').filter(label => label.text().includes('Op')).map(label => label.text())).toEqual([expect.stringContaining('Pushrod wall')])
  await dialog.get('form').trigger('submit')
  expect(last()?.content?.find(node => node.type === 'limit')?.attrs).toEqual({ criterion: 'P-02' })
})

it('goes to the block that lacks its words, and not to one that is gone', async () => {
  const { editor, jump } = await editing(whole)
  expect(jump('content.4.attrs.alt')).toBe(true)
  expect(editor.state.doc.nodeAt(editor.state.selection.from)?.type.name).toBe('figure')
  expect(jump('content.5.content.1')).toBe(true)
  expect(editor.state.selection.$from.node(-1).textContent).toBe('Wipe.')
  expect(jump('content.44.attrs.alt')).toBe(false)
})

it('refuses a link that runs or pretends, and takes one to another lesson', async () => {
  const { wrapper, editor, last, press } = await editing({ type: 'doc', content: [words('See the walls.')] })
  editor.commands.setTextSelection({ from: 9, to: 14 })
  await press('Link')
  const dialog = wrapper.findAll('dialog').find(one => one.text().includes('Where it leads'))!
  await dialog.get('input').setValue('javascript:alert(1)')
  await dialog.get('form').trigger('submit')
  expect(last()).toBeNull()
  expect(dialog.get('[role="alert"]').text()).toContain('/lessons/')
  await dialog.get('input').setValue('/lessons/walls-and-pinch#pinch')
  await dialog.get('form').trigger('submit')
  expect(last()?.content?.[0]?.content?.[1]).toMatchObject({ text: 'walls', marks: [{ type: 'link', attrs: { href: '/lessons/walls-and-pinch#pinch' } }] })
  expect(checkDocument(last()).issues).toBeNull()
})

it('is one stop of the Tab key, and arrows go from tool to tool', async () => {
  const { wrapper } = await editing({ type: 'doc', content: [words('Start.')] })
  const bar = wrapper.get('[role="toolbar"]')
  const stops = () => bar.findAll('button').filter(button => button.attributes('tabindex') === '0').map(button => button.attributes('data-tool'))
  expect(stops()).toEqual(['undo'])
  ;(bar.get('[data-tool="undo"]').element as HTMLElement).focus()
  await bar.trigger('keydown', { key: 'ArrowRight' })
  await bar.trigger('keydown', { key: 'ArrowRight' })
  expect(stops()).toEqual(['h2'])
  expect(globalThis.document.activeElement?.getAttribute('data-tool')).toBe('h2')
  await bar.trigger('keydown', { key: 'End' })
  expect(stops()).toEqual(['limit'])
})
