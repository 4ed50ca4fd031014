import { defineStore } from 'pinia'
import { computed, ref, shallowRef, toRaw, triggerRef } from 'vue'
import { toFailure } from '#shared/contract/failure'
import type { ReadingInput } from '#shared/contract/inputs'
import { openDevice } from './device-database'
import { newParcel, type OutboxItem } from './outbox-item'
import { sendItem, type Get, type Post } from './send-item'

/** What is sent again by itself; anything else the server said no to and a person must look. */
const passing = new Set([0, 401, 408, 425, 429, 500, 502, 503, 504])

/**
 * Everything taken or typed at the bench that the server has not yet said it has. Kept in the browser's database, per
 * person, until it has: a reload, a dead battery, a lost network or an ended session loses nothing.
 */
export const useOutbox = defineStore('outbox', () => {
  const items = shallowRef<OutboxItem[]>([])
  const person = ref<string | null>(null)
  const online = ref(true)
  const signInNeeded = ref(false)
  let running = false
  let wait = 1000
  let timer: ReturnType<typeof setTimeout> | undefined
  const filedListeners = new Set<(item: OutboxItem, answer: unknown) => void>()

  const waiting = computed(() => items.value.filter(item => item.state !== 'refused').length)
  const forSubmission = (submissionId: string) => computed(() => items.value.filter(item => item.submissionId === submissionId))

  async function keep(item: OutboxItem) {
    const device = await openDevice()
    await device.put('outbox', structuredClone(toRaw(item)))
    triggerRef(items)
  }

  /** Loads what this person left here. Another person's items stay in the database, untouched. */
  async function open(personId: string) {
    person.value = personId
    const device = await openDevice()
    items.value = (await device.getAllFromIndex('outbox', 'person', personId)).map(item => ({ ...item, state: item.state === 'sending' ? 'waiting' as const : item.state })).sort((a, b) => a.addedAt - b.addedAt)
    signInNeeded.value = false
    void run()
  }

  async function add(item: OutboxItem) {
    items.value = [...items.value, item]
    await keep(item)
    void run()
  }

  /** Two things of one millisecond still have an order, also after a reload. */
  const nextTime = () => Math.max(Date.now(), (items.value.at(-1)?.addedAt ?? 0) + 1)

  function common(submissionId: string) {
    if (!person.value) throw new Error('outbox used before open()')
    return { id: crypto.randomUUID(), uploadKey: crypto.randomUUID(), person: person.value, submissionId, addedAt: nextTime(), state: 'waiting' as const, progress: 0, problem: null }
  }

  const addPhoto = (submissionId: string, file: File, input: Extract<OutboxItem, { kind: 'photo' }>['input']) => add({ ...common(submissionId), kind: 'photo', parcel: newParcel(file), input })
  const addSheet = (submissionId: string, file: File, input: Extract<OutboxItem, { kind: 'flow-sheet' }>['input'] = {}) => add({ ...common(submissionId), kind: 'flow-sheet', parcel: newParcel(file), input })
  const addDocument = (submissionId: string, file: File, note: string) => add({ ...common(submissionId), kind: 'document', parcel: newParcel(file), input: { note } })
  const addReading = (submissionId: string, input: ReadingInput) => add({ ...common(submissionId), kind: 'reading', input })

  async function forget(id: string) {
    items.value = items.value.filter(item => item.id !== id)
    await (await openDevice()).delete('outbox', id)
  }

  async function again(id: string) {
    const item = items.value.find(one => one.id === id)
    if (!item) return
    item.state = 'waiting'
    item.problem = null
    await keep(item)
    void run()
  }

  /** Told of every item the server has: a page refreshes what it shows. */
  function onFiled(listener: (item: OutboxItem, answer: unknown) => void) {
    filedListeners.add(listener)
    return () => filedListeners.delete(listener)
  }

  // The typed route map is too deep for paths made at run time.
  const call = $fetch as unknown as (path: string, options: Record<string, unknown>) => Promise<never>
  const post: Post = (path, body, key) => call(path, { method: 'POST', body, headers: { 'idempotency-key': key }, retry: false })
  const get: Get = path => call(path, { retry: false })

  /** One item at a time, oldest first, until none is waiting or the network is gone. */
  async function run() {
    if (running) return
    running = true
    clearTimeout(timer)
    try {
      for (;;) {
        const item = items.value.find(one => one.state === 'waiting' && one.person === person.value)
        if (!item) return
        item.state = 'sending'
        triggerRef(items)
        try {
          const answer = await sendItem(item, post, get, keep)
          await forget(item.id)
          online.value = true
          signInNeeded.value = false
          wait = 1000
          for (const listener of filedListeners) listener(item, answer)
        }
        catch (thrown) {
          const failure = toFailure(thrown)
          item.progress = 0
          if (passing.has(failure.status)) {
            item.state = 'waiting'
            online.value = failure.status !== 0
            signInNeeded.value = failure.status === 401
            await keep(item)
            if (!signInNeeded.value) later()
            return
          }
          item.state = 'refused'
          item.problem = { code: failure.code, sentence: failure.sentence, issues: failure.issues }
          await keep(item)
        }
      }
    }
    finally {
      running = false
    }
  }

  function later() {
    clearTimeout(timer)
    timer = setTimeout(run, wait)
    wait = Math.min(wait * 2, 30_000)
  }

  /** The browser says the network is back, or the page is looked at again. */
  function wake() {
    wait = 1000
    void run()
  }

  return { items, online, signInNeeded, waiting, forSubmission, open, addPhoto, addSheet, addDocument, addReading, forget, again, onFiled, wake }
})
