import { computed, onBeforeUnmount, onMounted, ref, shallowRef } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { LessonDocument } from '#shared/contract/lesson-document'
import type { DraftView } from '#shared/contract/lessons'
import { useLessonDrafts, type KeptLesson } from '~/stores/lesson-drafts'
import { useApi } from './useApi'
import { useMe } from './useMe'

/**
 * Where the text stands. `typing`: changed, and sent in a moment; `kept-here`: the server cannot be reached, it is on this device and goes up when it can;
 * `refused`: the server said no and said why; `stale`: somebody else saved, and a person decides which text stays.
 */
export type DraftState = 'loading' | 'saved' | 'typing' | 'saving' | 'kept-here' | 'refused' | 'stale'

/** A pause in typing this long sends what was typed. */
const pauseMs = 1000
/** What is sent again by itself; anything else the server said no to and a person must look. */
const passing = new Set([0, 401, 408, 425, 429, 500, 502, 503, 504])

/**
 * A lesson being written: saved by itself after every pause, kept on this device until the server has it, and never over somebody else's text unasked.
 * `text` is what stands in the editor; `generation` grows when something other than typing changed it, and the editor then shows it anew.
 */
export function useLessonDraft(slug: string) {
  const api = useApi()
  const { me } = useMe()
  const drafts = useLessonDrafts()
  const state = ref<DraftState>('loading')
  const failure = ref<Failure | null>(null)
  const loadFailure = ref<Failure | null>(null)
  /** The server's draft as last seen. */
  const draft = shallowRef<DraftView | null>(null)
  const text = shallowRef<{ title: string, document: LessonDocument } | null>(null)
  const generation = ref(0)
  /** What the other one saved, while `stale`. */
  const theirs = shallowRef<DraftView | null>(null)
  /** My own text, set aside when theirs was taken: to copy from, until it is thrown away. */
  const aside = shallowRef<KeptLesson | null>(null)
  /** Text found on this device that the server did not have. */
  const restored = ref(false)
  let timer: ReturnType<typeof setTimeout> | undefined
  let running: Promise<void> | null = null
  let changed = false
  /** The revision the text in the editor was written over; older than `draft` while `stale`. */
  let seen = 0
  /** A save whose answer never came: sent again as it was, under its own key, so that it cannot stand against itself. */
  let unanswered: { key: string, seen: number, title: string, document: LessonDocument } | null = null
  let retryMs = pauseMs

  const person = () => me.value?.id ?? 'nobody'
  const unsent = computed(() => state.value !== 'saved' && state.value !== 'loading')

  function show(next: { title: string, document: LessonDocument }) {
    text.value = { title: next.title, document: next.document }
    generation.value += 1
  }

  async function open() {
    const answer = await api.get<DraftView>(`/api/lessons/${slug}/draft`)
    const kept = await drafts.open(person(), slug)
    aside.value = await drafts.open(person(), slug, 'aside')
    if (!answer.ok) {
      loadFailure.value = answer.failure
      return
    }
    loadFailure.value = null
    draft.value = answer.value
    seen = answer.value.revision
    unanswered = null
    if (!kept || same(kept, answer.value)) {
      if (kept) await drafts.discard(person(), slug)
      show(answer.value)
      state.value = 'saved'
      return
    }
    restored.value = true
    show(kept)
    changed = true
    if (kept.seen === answer.value.revision) {
      state.value = 'typing'
      later(0)
    }
    else {
      seen = kept.seen
      theirs.value = answer.value
      state.value = 'stale'
    }
  }

  /** Every stroke of the keyboard comes here. */
  function change(next: { title?: string, document?: LessonDocument }) {
    if (!text.value || !draft.value) return
    text.value = { ...text.value, ...next }
    changed = true
    keepHere()
    if (state.value === 'stale') return
    state.value = 'typing'
    later(pauseMs)
  }

  function keepHere() {
    if (text.value) void drafts.keep(person(), slug, { seen, ...text.value })
  }

  function later(ms: number) {
    clearTimeout(timer)
    timer = setTimeout(() => void save(), ms)
  }

  /** Sends now what was typed; answers once the server has it, or it is known why not. One save at a time. */
  async function save(): Promise<void> {
    clearTimeout(timer)
    if (running) {
      await running
      return changed ? save() : undefined
    }
    if (!changed || !draft.value || !text.value || state.value === 'stale') return
    running = send().finally(() => {
      running = null
    })
    await running
  }

  async function send() {
    const before = text.value
    if (!before) return
    state.value = 'saving'
    changed = false
    const call = unanswered ?? { key: crypto.randomUUID(), seen, title: before.title, document: before.document }
    unanswered = call
    const answer = await api.post<DraftView>(`/api/lessons/${slug}/draft`, { seen: call.seen, title: call.title, document: call.document }, call.key)
    if (answer.ok) return sent(call, answer.value)
    if (answer.failure.status) unanswered = null
    const other = answer.failure.code === 'draft_stale' ? theirsOf(answer.failure) : null
    // An earlier try came through and its answer was lost.
    if (other && same(call, other)) return sent(call, other)
    changed = true
    keepHere()
    failure.value = other ? null : answer.failure
    if (other) {
      theirs.value = other
      state.value = 'stale'
    }
    else if (passing.has(answer.failure.status)) {
      state.value = 'kept-here'
      later(retryMs)
      retryMs = Math.min(retryMs * 2, 30_000)
    }
    else state.value = 'refused'
  }

  async function sent(what: { title: string, document: LessonDocument }, now: DraftView) {
    draft.value = now
    seen = now.revision
    unanswered = null
    failure.value = null
    retryMs = pauseMs
    if (text.value && text.value.title === what.title && text.value.document === what.document) {
      changed = false
      state.value = 'saved'
      await drafts.discard(person(), slug)
    }
    else {
      // Typed on while it was on its way: that is kept here over the new revision, and goes up next.
      changed = true
      keepHere()
      state.value = 'typing'
      later(pauseMs)
    }
  }

  /** My text goes over theirs, on purpose; the server keeps nothing of theirs but what was published. */
  async function keepMine() {
    if (!theirs.value) return
    draft.value = theirs.value
    seen = theirs.value.revision
    theirs.value = null
    state.value = 'typing'
    changed = true
    await save()
  }

  /** Their text stands in the editor; mine is laid aside to copy from. */
  async function takeTheirs() {
    if (!theirs.value || !text.value) return
    await drafts.keep(person(), slug, { seen: theirs.value.revision, ...text.value }, 'aside')
    aside.value = await drafts.open(person(), slug, 'aside')
    draft.value = theirs.value
    seen = theirs.value.revision
    show(theirs.value)
    theirs.value = null
    changed = false
    state.value = 'saved'
    await drafts.discard(person(), slug)
  }

  async function throwAsideAway() {
    aside.value = null
    await drafts.discard(person(), slug, 'aside')
  }

  /** The draft became a version: the page starts again from what the server has. */
  async function reopen() {
    state.value = 'loading'
    await open()
  }

  const wake = () => {
    retryMs = pauseMs
    if (state.value === 'kept-here') void save()
  }
  const leave = () => document.visibilityState === 'hidden' && void save()
  onMounted(() => {
    void open()
    window.addEventListener('online', wake)
    document.addEventListener('visibilitychange', leave)
  })
  onBeforeUnmount(() => {
    clearTimeout(timer)
    window.removeEventListener('online', wake)
    document.removeEventListener('visibilitychange', leave)
  })

  return { state, failure, loadFailure, draft, text, generation, theirs, aside, restored, unsent, open, change, save, keepMine, takeTheirs, throwAsideAway, reopen }
}

const same = (a: { title: string, document: LessonDocument }, b: { title: string, document: LessonDocument }) => a.title === b.title && canonical(a.document) === canonical(b.document)

/** Two ways of writing the same document are the same: names in order, nothing where nothing is said, and without the addresses the server gives headings. */
function canonical(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonical).join()}]`
  if (!value || typeof value !== 'object') return JSON.stringify(value ?? null)
  return `{${Object.entries(value).filter(([name, one]) => one !== undefined && one !== null && name !== 'id').sort(([a], [b]) => (a < b ? -1 : 1)).map(([name, one]) => `${JSON.stringify(name)}:${canonical(one)}`).join()}}`
}

function theirsOf(failure: Failure): DraftView | null {
  const other = failure.extra.theirs as DraftView | undefined
  return other && typeof other.revision === 'number' ? other : null
}
