import { weekdayOf } from '#shared/domain/money/calendar-days'
import type { Letter } from '../letter'
import { dateInWords } from '../school-words'

/** Message 7: what to bring on the first day. `core` is null while none is drawn. */
export function welcome({ first, cohort, startsOn, pattern, core, lesson, url }: { first: string, cohort: string, startsOn: string, pattern: string, core: string | null, lesson: number, url: string }): Letter {
  return {
    subject: `${weekdayOf(startsOn)}: what to bring`,
    paragraphs: [
      { text: `${first}, ${cohort} begins on ${dateInWords(startsOn)} (${pattern}).` },
      { text: 'Cotton clothes, shoes that cover the foot, hair tied, no rings. Bring no gloves; staff lend them for washing and chemicals. None near anything that turns. We lend eyes, ears and mask fitted on the night.' },
      { text: `Read lesson ${lesson} (25 min).${core === null ? '' : ` Your core is ${core}.`}` },
    ],
    action: { label: `Read lesson ${lesson}`, url },
    from: 'Hanne Brockwell, Sallowbeck',
  }
}
