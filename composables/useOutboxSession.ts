import { onBeforeUnmount, onMounted, watch } from 'vue'
import { useOutbox } from '~/stores/outbox/outbox'
import { useMe } from './useMe'

/** Opens the outbox for whoever is signed in, and wakes it when the network or the person comes back. */
export function useOutboxSession() {
  const { me } = useMe()
  const outbox = useOutbox()
  const wake = () => outbox.wake()
  onMounted(() => {
    watch(() => me.value?.id, id => id && outbox.open(id), { immediate: true })
    window.addEventListener('online', wake)
    document.addEventListener('visibilitychange', wake)
  })
  onBeforeUnmount(() => {
    window.removeEventListener('online', wake)
    document.removeEventListener('visibilitychange', wake)
  })
  return outbox
}
