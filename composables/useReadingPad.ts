import { computed, ref, watch, type Ref } from 'vue'
import type { InstrumentView, SubmissionView, WantedView } from '#shared/contract/views'
import { useOutbox } from '~/stores/outbox/outbox'
import { useReadingDrafts, type ReadingDraft } from '~/stores/reading-drafts'
import { useMe } from './useMe'

/** One spot to read: a wanted reading, or the same after it was taken. */
export interface PadSpot { key: string, want: WantedView }

/**
 * The reading pad: which spot is being read, the figures as they are typed, and sending them. Every stroke on the
 * pad is kept on this device until the server has it.
 */
export function useReadingPad(submissionId: string, submission: Ref<SubmissionView | null | undefined>, instruments: Ref<InstrumentView[] | null | undefined>) {
  const { me } = useMe()
  const drafts = useReadingDrafts()
  const outbox = useOutbox()
  const spotKey = ref<string | null>(null)
  const values = ref<string[]>([])
  const typing = ref('')
  /** Spot in the student's own words, where the want names none. */
  const where = ref('')
  const unit = ref('mm')
  const instrument = ref('')
  /** What stood here before is back; until then nothing is said of the spots. */
  const restored = ref(false)
  /** Spots sent from here: the outbox may be rid of one before this page hears that the server has it, and it must not come up again. */
  const sent = new Set<string>()

  const spots = computed<PadSpot[]>(() => (submission.value?.wanted ?? []).filter(want => want.kind === 'reading').map(want => ({ key: [want.quantity, want.cylinder, want.side, want.spot, want.when].join('|'), want })))
  const spot = computed(() => spots.value.find(one => one.key === spotKey.value) ?? null)
  const fit = computed(() => (instruments.value ?? []).filter(one => spot.value?.want.quantity && one.quantities.includes(spot.value.want.quantity)))

  /** Goes to the spot named, or on to the next that still lacks a reading; to none when every spot is read. */
  function choose(key?: string) {
    const here = spots.value.findIndex(one => one.key === spotKey.value)
    const next = key ?? [...spots.value.slice(here + 1), ...spots.value.slice(0, here + 1)].find(one => one.want.have < one.want.count && !pendingAt(one) && !sent.has(one.key))?.key ?? null
    if (next === spotKey.value) return
    spotKey.value = next
    values.value = []
    typing.value = ''
    where.value = ''
    if (!fit.value.some(one => one.code === instrument.value)) instrument.value = fit.value[0]?.code ?? ''
  }

  function pendingAt(one: PadSpot): boolean {
    return outbox.items.some(item => item.kind === 'reading' && item.submissionId === submissionId && item.input.quantity === one.want.quantity && item.input.cylinder === one.want.cylinder && item.input.side === one.want.side && (one.want.spot === null || (item.input.at?.spot ?? null) === one.want.spot) && (item.input.when ?? null) === one.want.when)
  }

  const draft = computed<ReadingDraft | null>(() => spot.value && { quantity: spot.value.want.quantity ?? '', cylinder: spot.value.want.cylinder, side: spot.value.want.side, spot: spot.value.want.spot, where: where.value, when: spot.value.want.when, values: values.value, typing: typing.value, unit: unit.value, instrument: instrument.value })
  watch(draft, (now) => {
    if (me.value && now && (now.typing || now.values.length)) void drafts.keep(me.value.id, submissionId, now)
  })

  /** Puts back what stood on the pad before a reload. */
  async function restore() {
    if (!me.value) return
    const kept = await drafts.open(me.value.id, submissionId)
    restored.value = true
    const key = kept && [kept.quantity, kept.cylinder, kept.side, kept.spot, kept.when].join('|')
    if (!kept || !key || !spots.value.some(one => one.key === key)) return choose()
    choose(key)
    values.value = kept.values
    where.value = kept.where ?? ''
    typing.value = kept.typing
    unit.value = kept.unit
    instrument.value = kept.instrument
  }

  /** The figure on the pad becomes one more repeat at this spot. */
  function addRepeat() {
    if (!typing.value) return
    values.value = [...values.value, typing.value]
    typing.value = ''
  }
  function dropRepeat(index: number) {
    values.value = values.value.filter((_, at) => at !== index)
  }

  /** Hands the figures to the outbox and goes on to the next spot. */
  async function send() {
    addRepeat()
    const now = draft.value
    if (!now || !now.values.length || !me.value) return
    await outbox.addReading(submissionId, {
      quantity: now.quantity, cylinder: now.cylinder, side: now.side, values: [...now.values], unit: now.unit, instrument: now.instrument, takenAt: new Date().toISOString(),
      ...(now.spot || now.where.trim() ? { at: { spot: now.spot ?? now.where.trim() } } : {}), ...(now.when ? { when: now.when } : {}),
    })
    if (spotKey.value) sent.add(spotKey.value)
    await drafts.discard(me.value.id, submissionId)
    values.value = []
    choose()
  }
  return { restored, spots, spot, spotKey, fit, values, typing, where, unit, instrument, choose, restore, addRepeat, dropRepeat, send, pendingAt }
}
