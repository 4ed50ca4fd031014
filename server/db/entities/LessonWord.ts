import { defineEntity, p, type InferEntity } from '@mikro-orm/core'

/** A word that stands in some lesson or caption, or stood there once: what a misspelt or half-typed word of a search may have meant. */
export const LessonWord = defineEntity({
  name: 'LessonWord',
  properties: {
    word: p.string().length(40).primary(),
  },
  indexes: [
    { name: 'lesson_word_letters', expression: 'create index "lesson_word_letters" on "lesson_word" using gin ("word" gin_trgm_ops)' },
  ],
})
export type LessonWord = InferEntity<typeof LessonWord>
