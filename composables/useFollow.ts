import { onBeforeUnmount, onMounted, ref, watch, type Ref } from 'vue'

/**
 * Calls `changed` whenever the server says that the submission moved: over server-sent events, and by asking every
 * few seconds where those do not come through. Follows only while `wanted`.
 */
export function useFollow(submissionId: Ref<string | null>, wanted: Ref<boolean>, changed: () => unknown) {
  const by = ref<'nothing' | 'events' | 'polling'>('nothing')
  let source: EventSource | undefined
  let timer: ReturnType<typeof setInterval> | undefined

  function stop() {
    source?.close()
    source = undefined
    clearInterval(timer)
    by.value = 'nothing'
  }

  function poll() {
    stop()
    by.value = 'polling'
    timer = setInterval(changed, 3000)
  }

  function start() {
    stop()
    if (!submissionId.value || !wanted.value) return
    if (typeof EventSource === 'undefined') return poll()
    source = new EventSource(`/api/submissions/${submissionId.value}/events`)
    by.value = 'events'
    source.addEventListener('submission', () => changed())
    // The browser tries again by itself after a cut; only a refusal ends the stream for good.
    source.onerror = () => source?.readyState === EventSource.CLOSED && poll()
  }

  onMounted(() => watch([submissionId, wanted], start, { immediate: true }))
  onBeforeUnmount(stop)
  return { by }
}
