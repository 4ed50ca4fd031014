import type { Letter } from '../letter'

export interface Results {
  first: string
  head: string
  /** "Sound", "not yet". */
  word: string
  /** 0 to 100; null when nothing was assessed. */
  score: number | null
  /** "16.8 ± 0.9 %"; null without a baseline and a later curve of the intake. */
  gain: string | null
  /** Titles of what was done well. */
  best: string[]
  workOn: { title: string, text: string } | null
  url: string
}

/** Message 16: the result of a head. */
export function results({ first, head, word, score, gain, best, workOn, url }: Results): Letter {
  const numbers = ['', 'One thing', 'Two things', 'Three things']
  return {
    subject: `Your result: ${word}`,
    paragraphs: [
      { text: `${first}, ${head}: ${word}${score === null ? '' : `, ${score} of 100`}.${gain === null ? '' : ` Lift-weighted intake ${gain}.`}`, strong: true },
      ...(best.length > 0 ? [{ text: `${numbers[best.length] ?? `${best.length} things`} you do well:`, items: best }] : []),
      ...(workOn ? [{ text: `One to work on: ${workOn.title}.${workOn.text === '' ? '' : ` ${workOn.text}`}` }] : []),
      { text: 'You keep the record for good.' },
    ],
    action: { label: 'Certificate and full record', url },
    from: 'Sallowbeck School of Head Work',
  }
}
