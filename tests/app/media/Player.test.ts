import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { MediaView } from '#shared/contract/media'
import Player from '~/components/media/Player.vue'

const media = (change: Partial<MediaView> = {}): MediaView => ({
  id: 'film', kind: 'video', title: 'Dummy valves', state: 'ready', problem: null, fileUrl: '/api/media/film/file', contentType: 'video/mp4', bytes: 1, width: 960, height: 540, durationSeconds: 20,
  tracks: [
    { kind: 'captions', language: 'en', url: '/api/media/film/tracks/captions.vtt?language=en', cues: [{ fromMs: 0, toMs: 4000, text: 'A kerb' }, { fromMs: 5000, toMs: 9000, text: 'The lip at twelve' }, { fromMs: 12_000, toMs: 15_000, text: 'Level' }] },
    { kind: 'chapters', language: 'en', url: '/c', cues: [{ fromMs: 0, toMs: 5000, text: 'Before' }, { fromMs: 5000, toMs: 20_000, text: 'After' }] },
  ],
  addedBy: null, addedAt: '2026-03-01T10:00:00Z', position: null, ...change,
})

/** A player whose film is a clock we set: happy-dom plays nothing. */
async function player(props: Record<string, unknown> = {}) {
  const wrapper = await mountSuspended(Player, { props: { media: media(), ...props } })
  const element = wrapper.get('video').element
  const film = { currentTime: 0, paused: true, duration: 20, readyState: 4, seeking: false }
  for (const name of Object.keys(film) as (keyof typeof film)[]) Object.defineProperty(element, name, { get: () => film[name], set: value => Object.assign(film, { [name]: value }), configurable: true })
  element.play = vi.fn(() => {
    film.paused = false
    return Promise.resolve()
  })
  element.pause = vi.fn(() => {
    film.paused = true
  })
  element.load = vi.fn()
  const at = async (seconds: number) => {
    film.currentTime = seconds
    await wrapper.get('video').trigger('timeupdate')
  }
  const current = () => wrapper.findAll('[aria-label="What is said"] [aria-current="true"]').map(line => line.text())
  return { wrapper, film, element, at, current }
}

beforeEach(() => {
  vi.useFakeTimers({ toFake: ['Date', 'setTimeout', 'clearTimeout'] })
})
afterEach(() => {
  vi.useRealTimers()
})

describe('the player', () => {
  it('has its captions on, marks what is said and the chapter, and moves with the film', async () => {
    const { wrapper, at, current } = await player()
    const [captions] = wrapper.findAll('track')
    expect(captions?.attributes()).toMatchObject({ kind: 'captions', srclang: 'en' })
    expect(captions?.attributes('default')).toBeDefined()
    await at(6)
    expect(current()).toEqual(['0:05The lip at twelve'])
    expect(wrapper.get('nav [aria-current="true"]').text()).toContain('After')
    await at(13)
    expect(current()).toEqual(['0:12Level'])
  })

  it('goes where a line is pressed, and runs', async () => {
    const { wrapper, film, element } = await player()
    await wrapper.findAll('[aria-label="What is said"] button')[1]!.trigger('click')
    expect(film.currentTime).toBe(5)
    expect(element.play).toHaveBeenCalledOnce()
  })

  it('opens where the reader stopped on another device, and at the second a search found instead', async () => {
    const stopped = { media: media({ position: { seconds: 7.5, finished: false } }) }
    const first = await player(stopped)
    await first.wrapper.get('video').trigger('loadedmetadata')
    expect(first.film.currentTime).toBe(7.5)
    const found = await player({ ...stopped, at: 12 })
    await found.wrapper.get('video').trigger('loadedmetadata')
    expect(found.film.currentTime).toBe(12)
  })

  it('stops at the end of its piece, and begins the piece again when played from there', async () => {
    const { wrapper, film, element, at } = await player({ start: 5, end: 9 })
    expect(wrapper.text()).toContain('0:05–0:09')
    expect(wrapper.text()).not.toContain('A kerb')
    film.paused = false
    await at(8.9)
    await at(9.1)
    expect(element.pause).toHaveBeenCalledOnce()
    expect(film.currentTime).toBe(9)
    await wrapper.get('video').trigger('play')
    expect(film.currentTime).toBe(5)
  })

  it('says where it is every five seconds, when it stops and when it is left, and nothing twice', async () => {
    const { wrapper, film, at } = await player()
    const told = () => (wrapper.emitted('position') ?? []).map(([position]) => position)
    await wrapper.get('video').trigger('play')
    film.paused = false
    for (const second of [1, 2, 3, 4, 5, 6]) {
      vi.advanceTimersByTime(1000)
      await at(second)
    }
    expect(told()).toEqual([{ seconds: 5, finished: false }])
    film.paused = true
    await wrapper.get('video').trigger('pause')
    await wrapper.get('video').trigger('pause')
    expect(told()).toEqual([{ seconds: 5, finished: false }, { seconds: 6, finished: false }])
    film.paused = false
    await at(19.8)
    dispatchEvent(new Event('pagehide'))
    expect(told().at(-1)).toEqual({ seconds: 19.8, finished: true })
  })

  it('asks for a fresh address when nothing comes from one that ran out, and goes on at the same second', async () => {
    const { wrapper, film, element, at } = await player()
    await wrapper.get('video').trigger('loadstart')
    film.paused = false
    await at(6)
    film.readyState = 2
    await wrapper.get('video').trigger('waiting')
    vi.advanceTimersByTime(1000)
    await nextTick()
    // A slow line is not an old address.
    expect(wrapper.get('video').attributes('src')).toBe('/api/media/film/file')
    vi.advanceTimersByTime(60_000)
    await wrapper.get('video').trigger('waiting')
    vi.advanceTimersByTime(1000)
    await nextTick()
    await nextTick()
    expect(wrapper.get('video').attributes('src')).toBe('/api/media/film/file?again=1')
    expect(element.load).toHaveBeenCalledOnce()
    film.currentTime = 0
    film.paused = true
    await wrapper.get('video').trigger('loadedmetadata')
    expect(film.currentTime).toBe(6)
    expect(element.play).toHaveBeenCalledOnce()
  })

  it('says so, and asks a person, when it cannot go on at all', async () => {
    const { wrapper, at } = await player()
    await at(6)
    for (let tries = 0; tries < 4; tries += 1) {
      await wrapper.get('video').trigger('error')
      await nextTick()
    }
    expect(wrapper.get('[role="alert"]').text()).toContain('does not go on')
    await wrapper.get('[role="alert"] button').trigger('click')
    expect(wrapper.find('[role="alert"]').exists()).toBe(false)
  })

  it('says why a film cannot be shown', async () => {
    const wrapper = await mountSuspended(Player, { props: { media: media({ state: 'being checked' }) } })
    expect(wrapper.find('video').exists()).toBe(false)
    expect(wrapper.get('[role="status"]').text()).toContain('still being checked')
  })
})

describe('what is said', () => {
  it('is one tab stop, and arrows move among the lines', async () => {
    const wrapper = await mountSuspended(Player, { props: { media: media() }, attachTo: document.body })
    const lines = wrapper.findAll<HTMLButtonElement>('[aria-label="What is said"] button')
    expect(lines.map(line => line.attributes('tabindex'))).toEqual(['0', '-1', '-1'])
    lines[0]!.element.focus()
    await lines[0]!.trigger('keydown', { key: 'ArrowDown' })
    expect(document.activeElement).toBe(lines[1]!.element)
    await lines[1]!.trigger('keydown', { key: 'End' })
    expect(document.activeElement).toBe(lines[2]!.element)
    expect(lines.map(line => line.attributes('tabindex'))).toEqual(['-1', '-1', '0'])
    wrapper.unmount()
  })
})
