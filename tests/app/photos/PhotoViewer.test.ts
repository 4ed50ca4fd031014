import { mountSuspended } from '@nuxt/test-utils/runtime'
import { beforeAll, afterAll, describe, expect, it } from 'vitest'
import PhotoViewer from '~/components/photos/PhotoViewer.vue'

const pins = [{ number: 1, x: 0.25, y: 0.5, criterion: 'W-01', title: 'Seat land', text: 'Even all round' }]
// A window of 400 by 300 at (100, 50) of the screen: the test page lays nothing out itself.
const box = { left: 100, top: 50, right: 500, bottom: 350, width: 400, height: 300, x: 100, y: 50, toJSON: () => ({}) }
const asLaidOut = HTMLElement.prototype.getBoundingClientRect
beforeAll(() => {
  HTMLElement.prototype.getBoundingClientRect = () => box
})
afterAll(() => {
  HTMLElement.prototype.getBoundingClientRect = asLaidOut
})

async function viewer(more: Record<string, unknown> = {}) {
  const wrapper = await mountSuspended(PhotoViewer, { props: { src: '/photo.jpg', alt: 'Chamber, square on', width: 800, height: 600, pins, editable: true, ...more } })
  const frame = wrapper.get('[role="group"]')
  const pointer = (type: string, x: number, y: number, on = frame) => on.trigger(type, { pointerId: 1, button: 0, clientX: x, clientY: y })
  return { wrapper, frame, pointer }
}
const pinSpot = async (wrapper: Awaited<ReturnType<typeof viewer>>['wrapper']) => wrapper.findAll('button').find(button => button.text() === 'Pin a spot')!.trigger('click')

describe('PhotoViewer', () => {
  it('puts a pin down at the share of the photo that was pressed', async () => {
    const { wrapper, pointer } = await viewer()
    await pinSpot(wrapper)
    await pointer('pointerdown', 100 + 300, 50 + 75)
    await pointer('pointerup', 100 + 300, 50 + 75)
    expect(wrapper.emitted('add-pin')).toEqual([[{ x: 0.75, y: 0.25 }]])
  })
  it('puts it on the same iron when zoomed in', async () => {
    const { wrapper, frame, pointer } = await viewer()
    // Zoomed about the point (100, 75), a quarter along and a quarter down: that spot stays under the pointer.
    await frame.trigger('wheel', { deltaY: -500, ctrlKey: true, clientX: 200, clientY: 125 })
    expect((wrapper.vm as unknown as { view: { scale: number } }).view.scale).toBeCloseTo(Math.E, 3)
    await pinSpot(wrapper)
    await pointer('pointerdown', 200, 125)
    await pointer('pointerup', 200, 125)
    const [spot] = wrapper.emitted('add-pin')![0] as [{ x: number, y: number }]
    expect(spot.x).toBeCloseTo(0.25, 6)
    expect(spot.y).toBeCloseTo(0.25, 6)
  })
  it('does not take a drag for a press', async () => {
    const { wrapper, pointer } = await viewer()
    await pinSpot(wrapper)
    await pointer('pointerdown', 300, 200)
    await pointer('pointermove', 340, 230)
    await pointer('pointerup', 340, 230)
    expect(wrapper.emitted('add-pin')).toBeUndefined()
  })
  it('puts a pin down from the keyboard, at the cross in the middle', async () => {
    const { wrapper, frame } = await viewer()
    await frame.trigger('keydown', { key: 'Enter' })
    expect(wrapper.emitted('add-pin')).toBeUndefined()
    await pinSpot(wrapper)
    await frame.trigger('keydown', { key: 'Enter' })
    expect(wrapper.emitted('add-pin')).toEqual([[{ x: 0.5, y: 0.5 }]])
  })
  it('tells where a pin was dragged to, once, when it is let go', async () => {
    const { wrapper, frame, pointer } = await viewer()
    await wrapper.get('[data-pin="1"]').trigger('pointerdown', { pointerId: 1, button: 0, clientX: 200, clientY: 200, bubbles: true })
    await pointer('pointerdown', 200, 200)
    await pointer('pointermove', 260, 200)
    await pointer('pointermove', 300, 275)
    expect(wrapper.emitted('move-pin')).toBeUndefined()
    await frame.trigger('pointerup', { pointerId: 1, button: 0, clientX: 300, clientY: 275 })
    expect(wrapper.emitted('move-pin')).toEqual([[1, { x: 0.5, y: 0.75 }]])
  })
  it('moves a pin by its arrow keys, less when zoomed in', async () => {
    const { wrapper } = await viewer()
    await wrapper.get('[data-pin="1"]').trigger('keydown', { key: 'ArrowRight' })
    const [number, spot] = wrapper.emitted('move-pin')![0] as [number, { x: number, y: number }]
    expect(number).toBe(1)
    expect(spot.x).toBeCloseTo(0.255, 10)
    expect(spot.y).toBe(0.5)
  })
  it('lets nobody move or add pins who may only look', async () => {
    const { wrapper, pointer } = await viewer({ editable: false })
    expect(wrapper.text()).not.toContain('Pin a spot')
    await wrapper.get('[data-pin="1"]').trigger('keydown', { key: 'ArrowRight' })
    await pointer('pointerdown', 200, 200)
    await pointer('pointerup', 200, 200)
    expect(wrapper.emitted('move-pin')).toBeUndefined()
    expect(wrapper.emitted('add-pin')).toBeUndefined()
    await wrapper.get('[data-pin="1"]').trigger('click')
    expect(wrapper.emitted('select-pin')).toEqual([[1]])
  })
})
