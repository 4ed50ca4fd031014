import { computed, onBeforeUnmount, onMounted, ref, watch, type Ref } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { LessonView } from '#shared/contract/lessons'
import { useApi } from './useApi'

/** Read this long under one heading, the heading is where one stopped. */
const settleMs = 1500

/**
 * Which heading is being read, and telling the server where one stopped, so that the lesson goes on there on another device.
 * Nothing is told before the reader has moved: merely opening a lesson does not forget where they were.
 */
export function useLessonProgress(slug: string, lesson: Ref<LessonView | null | undefined>, article: Ref<HTMLElement | null>) {
  const api = useApi()
  const call = $fetch as unknown as (path: string, options: Record<string, unknown>) => Promise<unknown>
  const here = ref<string | null>(null)
  /** As set on this page; before that, as the lesson came. */
  const finishedNow = ref<boolean | null>(null)
  const finished = computed(() => finishedNow.value ?? lesson.value?.progress?.finished ?? false)
  const finishing = ref(false)
  const failure = ref<Failure | null>(null)
  /** What the server was told last from here; before that, as the lesson came. */
  let toldNow: string | null = null
  const told = () => toldNow ?? lesson.value?.progress?.anchor ?? null
  let moved = false
  let timer: ReturnType<typeof setTimeout> | undefined
  let observer: IntersectionObserver | undefined
  const above = new Map<string, boolean>()

  /** Where one stopped before this visit; the first heading is the beginning, and nothing to go back to. */
  const resume = computed(() => {
    const { progress, headings } = lesson.value ?? { progress: null, headings: [] }
    return progress && !progress.finished ? headings.slice(1).find(one => one.id === progress.anchor) ?? null : null
  })
  const hereHeading = computed(() => lesson.value?.headings.find(one => one.id === here.value) ?? null)

  async function tell() {
    clearTimeout(timer)
    if (!moved || here.value === told() || !here.value) return
    const anchor = here.value
    // Sent so that it arrives although the page is being left. Without a network it is told when the next heading is.
    await call(`/api/lessons/${slug}/progress`, { method: 'POST', body: { anchor, finished: finished.value }, keepalive: true, retry: false }).then(() => {
      toldNow = anchor
    }, () => undefined)
  }

  function settle() {
    clearTimeout(timer)
    timer = setTimeout(() => void tell(), settleMs)
  }

  /** The last heading that has gone past the upper third of the screen is the one being read. */
  function look(entries: IntersectionObserverEntry[]) {
    for (const entry of entries) above.set(entry.target.id, entry.isIntersecting)
    const now = (lesson.value?.headings ?? []).filter(one => above.get(one.id)).at(-1)?.id ?? null
    if (now === here.value) return
    here.value = now
    if (moved) settle()
  }

  function watchHeadings() {
    observer?.disconnect()
    above.clear()
    if (!article.value || typeof IntersectionObserver === 'undefined') return
    // The room watched reaches far up: a heading jumped over counts as gone past, whether or not it was ever seen.
    observer = new IntersectionObserver(look, { rootMargin: '1000000px 0px -66% 0px' })
    for (const heading of article.value.querySelectorAll('h2[id], h3[id], h4[id]')) observer.observe(heading)
  }

  async function markRead(done: boolean) {
    finishing.value = true
    const answer = await api.post(`/api/lessons/${slug}/progress`, { anchor: here.value ?? told(), finished: done })
    finishing.value = false
    failure.value = answer.ok ? null : answer.failure
    if (answer.ok) finishedNow.value = done
  }

  const onScroll = () => {
    moved = true
    settle()
  }
  const leave = () => document.visibilityState === 'hidden' && void tell()
  onMounted(() => {
    watch([article, lesson], watchHeadings, { immediate: true, flush: 'post' })
    // Only what a hand does: the jump to a heading named in the address is a move too, and comes as a scroll.
    window.addEventListener('scroll', onScroll, { passive: true })
    document.addEventListener('visibilitychange', leave)
  })
  onBeforeUnmount(() => {
    void tell()
    clearTimeout(timer)
    observer?.disconnect()
    window.removeEventListener('scroll', onScroll)
    document.removeEventListener('visibilitychange', leave)
  })

  return { here, hereHeading, resume, finished, finishing, failure, markRead }
}
