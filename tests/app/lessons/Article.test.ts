import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
import Article from '~/components/lessons/Article.vue'
import Player from '~/components/media/Player.vue'
import type { LimitView } from '#shared/contract/lessons'
import type { MediaView } from '#shared/contract/media'

const film: MediaView = { id: '7f3c', kind: 'video', title: 'The ball', state: 'ready', problem: null, fileUrl: '/api/media/7f3c/file', contentType: 'video/mp4', bytes: 1, width: 640, height: 360, durationSeconds: 20, tracks: [], addedBy: null, addedAt: '2026-03-26T19:40:00Z', position: null }
const limit: LimitView = { criterion: 'W-01', title: 'Seat land', unit: 'mm', casting: null, bands: [{ band: { lo: 1.52, hi: 1.78, loKind: 'no-return', hiKind: 'put-right', softLo: null, softHi: null, borrowedFrom: null }, side: null, at: null, liftShare: null, words: '1.52 to 1.78 mm (0.060 to 0.070 in)', hard: null }] }
const html = '<h2 id="walls">Walls</h2><p>Text.</p><div data-block="limit" data-criterion="W-01"><p>Seat land, in words</p></div><div data-block="limit" data-criterion="Z-99"><p>Limit Z-99: the rubric has no such criterion.</p></div>'
  + '<div id="clip-1" data-block="clip" data-asset="7f3c" data-start="0" data-end="8" data-caption="First"><p><a href="/x">Film: First</a></p></div><div id="clip-2" data-block="clip" data-asset="7f3c" data-start="8" data-caption="Second"><p>Film: Second</p></div>'
const lesson = { html, limits: { 'W-01': limit }, clips: { '7f3c': film }, headings: [{ id: 'walls', text: 'Walls', level: 2 }] }

/** The browser's watch over what comes near; here a test says what does. */
const watched: { near: (element: Element) => void, all: Element[] } = { near: () => undefined, all: [] }
beforeEach(() => {
  watched.all = []
  vi.stubGlobal('IntersectionObserver', class {
    constructor(private readonly tell: (entries: { target: Element, isIntersecting: boolean }[]) => void) {
      watched.near = element => this.tell([{ target: element, isIntersecting: true }])
    }

    observe(element: Element) { watched.all.push(element) }
    unobserve() {}
    disconnect() {}
  })
  Element.prototype.scrollIntoView = vi.fn()
})
afterEach(() => vi.unstubAllGlobals())

const article = async (openAt: { clip: string, seconds: number } | null = null) => mountSuspended(Article, { props: { lesson, openAt }, attachTo: document.body, slots: { under: '<i>note room</i>' } })

describe('Article', () => {
  it('leaves a block in words until it comes near, then draws it in its place', async () => {
    const page = await article()
    expect(page.text()).toContain('Seat land, in words')
    watched.near(page.get('[data-criterion="W-01"]').element)
    await vi.waitFor(() => expect(page.find('[data-criterion="W-01"] svg').exists()).toBe(true))
    expect(page.text()).not.toContain('Seat land, in words')
    expect(page.get('[data-criterion="W-01"]').text()).toContain('1.52 to 1.78 mm')
  })
  it('keeps the words of a limit the rubric does not have', async () => {
    const page = await article()
    watched.near(page.get('[data-criterion="Z-99"]').element)
    await nextTick()
    expect(page.get('[data-criterion="Z-99"]').text()).toBe('Limit Z-99: the rubric has no such criterion.')
  })
  it('opens the piece of a film that holds the second, at the second, and goes to it', async () => {
    const page = await article({ clip: '7f3c', seconds: 12 })
    await vi.waitFor(() => expect(page.find('#clip-2 video').exists()).toBe(true))
    expect(page.findAllComponents(Player).map(player => player.props())).toMatchObject([{ start: 8, at: 12, caption: 'Second' }])
    expect(page.find('#clip-1 video').exists()).toBe(false)
    expect(Element.prototype.scrollIntoView).toHaveBeenCalled()
  })
  it('opens a film named by where it stands', async () => {
    const page = await article({ clip: 'clip-1', seconds: 3 })
    await vi.waitFor(() => expect(page.findAllComponents(Player).map(player => player.props('at'))).toEqual([3]))
    expect(page.find('#clip-1 video').exists()).toBe(true)
  })
  it('makes room for notes under each heading', async () => {
    const page = await article()
    expect(page.get('#walls').element.nextElementSibling?.textContent).toBe('note room')
  })
})
