import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import DataTable from '~/components/ui/DataTable.vue'
import type { TableSort } from '~/components/ui/table-column'

interface Row { id: string, who: string, wait: number | null }
const rows: Row[] = [{ id: 'a', who: 'Imre', wait: 19 }, { id: 'b', who: 'Bettany', wait: 3 }, { id: 'c', who: 'Dele', wait: null }]
const columns = [
  { key: 'who', label: 'Who', value: (row: Row) => row.who, sortable: true },
  { key: 'wait', label: 'Waiting', value: (row: Row) => row.wait, numeric: true, sortable: true },
]
const table = async (more: Record<string, unknown> = {}) => {
  const wrapper = await mountSuspended(DataTable, {
    // A generic component does not infer its row through the test helper.
    props: { 'caption': 'Waiting', columns, rows, 'rowKey': (row: object) => (row as Row).id, 'opens': true, ...more, 'onUpdate:sort': (sort: TableSort | null) => wrapper.setProps({ sort }) } as never,
    attachTo: document.body,
  })
  return wrapper
}
const names = (wrapper: Awaited<ReturnType<typeof table>>) => wrapper.findAll('tbody tr').map(row => row.get('td').text())

describe('DataTable', () => {
  it('sorts by a heading, turns on a second press, and keeps what is missing last both ways', async () => {
    const wrapper = await table()
    const heading = wrapper.findAll('th button')[1]!
    await heading.trigger('click')
    expect(names(wrapper)).toEqual(['Bettany', 'Imre', 'Dele'])
    expect(wrapper.findAll('th')[1]!.attributes('aria-sort')).toBe('ascending')
    await heading.trigger('click')
    expect(names(wrapper)).toEqual(['Imre', 'Bettany', 'Dele'])
    expect(wrapper.findAll('th')[1]!.attributes('aria-sort')).toBe('descending')
    expect(wrapper.findAll('th')[0]!.attributes('aria-sort')).toBe('none')
  })
  it('leaves the order alone when the server sorts', async () => {
    const wrapper = await table({ serverSorts: true })
    await wrapper.findAll('th button')[0]!.trigger('click')
    expect(names(wrapper)).toEqual(['Imre', 'Bettany', 'Dele'])
  })
  it('walks the rows with the arrows and opens one with Enter', async () => {
    const wrapper = await table()
    const row = (at: number) => wrapper.findAll('tbody tr')[at]!
    expect(wrapper.findAll('tbody tr').map(one => one.attributes('tabindex'))).toEqual(['0', '-1', '-1'])
    await row(0).trigger('keydown', { key: 'ArrowDown' })
    expect(document.activeElement).toBe(row(1).element)
    await row(1).trigger('keydown', { key: 'End' })
    expect(document.activeElement).toBe(row(2).element)
    await row(2).trigger('keydown', { key: 'ArrowDown' })
    expect(document.activeElement).toBe(row(2).element)
    await row(2).trigger('keydown', { key: 'Enter' })
    expect(wrapper.emitted('open')).toEqual([[rows[2]]])
  })
  it('has a caption and says when it is empty', async () => {
    const wrapper = await table({ rows: [], empty: 'Nobody waits.' })
    expect(wrapper.get('caption').text()).toBe('Waiting')
    expect(wrapper.text()).toContain('Nobody waits.')
  })
})
