import type { EntityManager } from '@mikro-orm/postgresql'
import { readContent } from '../../server/db/seeders/content'
import { steadyNoise } from '../seed/steady-noise'

export interface ManyLessons { lessons: number, passages: number, words: number }

const inBatches = 2000

/**
 * Fills a database with lessons to search: the school's own sentences dealt out anew, with invented words strewn in, so that common words
 * stand nearly everywhere and rare ones once or twice, as in any library. Six parts of about 90 words and six captions a lesson; the
 * same every time.
 */
export async function manyLessons(em: EntityManager, lessons: number): Promise<ManyLessons> {
  let turn = 0
  const random = () => (steadyNoise('many lessons', turn += 1) + 1) / 2 * 0.999_999
  const pick = <Value>(from: readonly Value[]): Value => from[Math.floor(random() * from.length)] as Value
  const sentences = readContent().lessons.flatMap(one => one.markdown.replaceAll(/[#*|`:>-]+/g, ' ').split(/(?<=[.?!])\s+/)).map(one => one.replaceAll(/\s+/g, ' ').trim()).filter(one => one.split(' ').length > 4)
  const syllables = ['ba', 'cor', 'den', 'fil', 'gar', 'hum', 'jas', 'kel', 'lom', 'mir', 'nod', 'pel', 'ruk', 'sil', 'tov', 'vun', 'wex', 'yal', 'zim']
  const invented = () => Array.from({ length: 3 + Math.floor(random() * 2) }, () => pick(syllables)).join('')
  const say = (count: number) => Array.from({ length: count }, () => pick(sentences)).join(' ') + ` ${invented()} ${invented()}`
  const run = (sql: string, params: unknown[]) => em.getConnection().execute(sql, params, 'run')

  const course = crypto.randomUUID()
  const module = crypto.randomUUID()
  await run('insert into course (id, code, title, summary, created_at) values (?, ?, ?, \'\', now())', [course, `many-${course.slice(0, 8)}`, 'Many lessons'])
  await run('insert into course_module (id, course_id, number, title, outcome, gates) values (?, ?, 1, \'Many\', \'\', \'{}\')', [module, course])
  const made = Array.from({ length: lessons }, (_, index) => ({ id: crypto.randomUUID(), number: 10_000 + index, slug: `many-${index}`, title: pick(sentences).slice(0, 120), module_id: module }))
  const passages = made.flatMap(({ id, title }) => [
    ...Array.from({ length: 6 }, (_, n) => ({ id: crypto.randomUUID(), lesson_id: id, ordinal: n * 2, kind: 'text', anchor: n === 0 ? '' : `part-${n}`, heading: n === 0 ? title : pick(sentences).split(' ').slice(0, 4).join(' '), body: say(6), from_ms: null as number | null })),
    ...Array.from({ length: 6 }, (_, n) => ({ id: crypto.randomUUID(), lesson_id: id, ordinal: n * 2 + 1, kind: 'caption', anchor: 'clip-1', heading: title, body: `${pick(sentences)}\n${pick(sentences)}`, from_ms: n * 4000 })),
  ])
  const words = [...new Set(passages.flatMap(one => `${one.heading} ${one.body}`.toLowerCase().match(/\p{L}{3,40}/gu) ?? []))].sort()
  await run('insert into lesson (id, number, slug, title, module_id, ops, created_at) select id, number, slug, title, module_id, \'{}\', now() from jsonb_to_recordset(?::jsonb) as one(id uuid, number int, slug text, title text, module_id uuid)', [JSON.stringify(made)])
  for (let from = 0; from < passages.length; from += inBatches) {
    await run('insert into lesson_passage (id, lesson_id, ordinal, kind, anchor, heading, body, from_ms) select * from jsonb_to_recordset(?::jsonb) as one(id uuid, lesson_id uuid, ordinal int, kind text, anchor text, heading text, body text, from_ms int)', [JSON.stringify(passages.slice(from, from + inBatches))])
  }
  await run('insert into lesson_word (word) select jsonb_array_elements_text(?::jsonb) on conflict do nothing', [JSON.stringify(words)])
  await run('vacuum analyze lesson_passage, lesson_word', [])
  return { lessons, passages: passages.length, words: words.length }
}
