import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id } from './column'
import { Lesson } from './Lesson'
import { MediaAsset } from './MediaAsset'

/**
 * A piece of a lesson's newest version as search finds it: what stands under one heading, or one caption of one of its clips.
 * Made anew at each publishing.
 */
export const LessonPassage = defineEntity({
  name: 'LessonPassage',
  properties: {
    id: id(),
    lesson: () => p.manyToOne(Lesson).ref(),
    ordinal: p.integer(),
    kind: p.enum(['text', 'caption'] as const),
    /** Id of the heading or clip on the lesson's page. */
    anchor: p.string().length(120),
    heading: p.text(),
    body: p.text(),
    clip: () => p.manyToOne(MediaAsset).ref().nullable(),
    /** Where in the clip the caption begins, milliseconds. */
    fromMs: p.integer().nullable(),
    words: p.text().columnType('tsvector').generated(`(setweight(to_tsvector('english'::regconfig, heading), 'A'::"char") || setweight(to_tsvector('english'::regconfig, body), 'B'::"char")) stored`).nullable().hidden().lazy(),
  },
  indexes: [
    { properties: ['lesson', 'ordinal'] },
    { name: 'lesson_passage_words', expression: 'create index "lesson_passage_words" on "lesson_passage" using gin ("words")' },
  ],
})
export type LessonPassage = InferEntity<typeof LessonPassage>
