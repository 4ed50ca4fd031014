import type { Letter } from '../letter'

export interface LessonChanged { number: number, title: string, whatChanged: string, why: string, by: string, url: string }

/** Message 18: lesson changed, to whoever is in the middle of a head. */
export function lessonChanged({ number, title, whatChanged, why, by, url }: LessonChanged): Letter {
  return {
    subject: `Lesson ${number} has changed`,
    paragraphs: [
      { text: `Lesson ${number}, ${title}, has a new version.` },
      { text: `What: ${sentence(whatChanged)}` },
      { text: `Why: ${sentence(why)}` },
      { text: 'You are mid-head under the old one: keep to it. It stays open to you until that head is done, and your instructor will say when something matters to you now.', strong: true },
    ],
    action: { label: `Open lesson ${number}`, url },
    from: by,
  }
}

/** Somebody's words, ending as a sentence does. */
function sentence(words: string): string {
  return /[.!?]$/.test(words) ? words : `${words}.`
}
