/**
 * What search asks the database, apart from the service so that its speed can be measured as it is. Parameters are `?`, in the order of
 * their names in each doc block.
 */

/** How many passages are ranked before the page is cut from them; a word in every passage would otherwise be ranked everywhere. */
export const mostRanked = 1000
/** Candidates that come out: enough that captions found twice can be told apart. */
export const mostCandidates = 80

const matching = (query: string, rank: 'ts_rank' | 'ts_rank_cd') => `
  with asked as materialized (select ${query} as q),
  matched as (
    select passage.id, passage.lesson_id, passage.ordinal, passage.kind, passage.anchor, passage.heading, passage.body, passage.clip_id, passage.from_ms, passage.words
      from lesson_passage passage
     where passage.words @@ (select q from asked)
       and (?::boolean or passage.lesson_id in (select lesson.id from lesson join course_module module on module.id = lesson.module_id where module.course_id::text in (select jsonb_array_elements_text(?::jsonb))))
     limit ${mostRanked}
  ),
  ranked as (
    select matched.id, matched.lesson_id, matched.ordinal, matched.kind, matched.anchor, matched.heading, matched.body, matched.clip_id, matched.from_ms, ${rank}(matched.words, (select q from asked), 1) as rank
      from matched order by rank desc, matched.lesson_id, matched.ordinal limit ${mostCandidates}
  )
  select ranked.id, ranked.lesson_id, ranked.ordinal, ranked.kind, ranked.anchor, ranked.heading, ranked.clip_id, ranked.from_ms, ranked.rank,
         ranked.kind = 'text' or to_tsvector('english', ranked.body) @@ (select q from asked) as said,
         ranked.kind = 'caption' and to_tsvector('english', split_part(ranked.body, e'\\n', 1)) @@ (select q from asked) as own
    from ranked order by ranked.rank desc, ranked.lesson_id, ranked.ordinal`

/** Passages with all the words, phrases and exclusions as written. Parameters: text, everything, courses as JSON. */
export const asWrittenSql = matching(`websearch_to_tsquery('english', ?)`, 'ts_rank_cd')
/** The same for a query made of near words. Parameters: query, everything, courses as JSON. */
export const nearWordsSql = matching(`to_tsquery('english', ?)`, 'ts_rank')

/** Words of the lessons near each of the given: those it begins, those one slip away, and those spelt most like it. Parameters: [{ word, slips }] as JSON. */
export const nearestWordsSql = `
  select asked.word as asked, near.word as near
    from jsonb_to_recordset(?::jsonb) as asked(word text, slips jsonb)
    cross join lateral (
      (select word from lesson_word where word like asked.word || '%' order by length(word), word limit 4)
      union
      (select word from lesson_word where word in (select jsonb_array_elements_text(asked.slips)) order by similarity(word, asked.word) desc, word limit 4)
      union
      (select word from lesson_word where word % asked.word and similarity(word, asked.word) >= 0.35 order by similarity(word, asked.word) desc, word limit 3)
    ) near`

/** What of each passage is shown, the words found between ⟦ and ⟧. Parameters: text as written or null, near query, text as written, ids as JSON. */
export const snippetsSql = `
  select passage.id, ts_headline('english', case when passage.body = '' then passage.heading else replace(passage.body, e'\\n', ' ') end,
           case when ?::text is null then to_tsquery('english', ?) else websearch_to_tsquery('english', ?) end,
           'StartSel=⟦, StopSel=⟧, MaxWords=32, MinWords=14, ShortWord=2, MaxFragments=1') as snippet
    from lesson_passage passage where passage.id = any (array(select jsonb_array_elements_text(?::jsonb)::uuid))`
