import type { EntityManager } from '@mikro-orm/postgresql'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import type { Actor } from '#server/utils/actor'
import { anywhere, keyset } from '#server/utils/keyset'
import type { MediaQuery, MediaView } from '#shared/contract/media'
import type { Page } from '#shared/contract/views'
import { viewMedia } from './view-media'

/** Pictures and films, newest first; `q` is looked for in their titles. @throws {Refusal} page_unknown */
export async function listMedia(em: EntityManager, actor: Actor, { q, kind, after, limit }: MediaQuery): Promise<Page<MediaView>> {
  const page = keyset({ by: 'm.added_at', direction: 'desc', type: 'timestamptz' }, 'm.id', after)
  const rows = await em.getConnection().execute<{ id: string, page_key: string }[]>(
    `select m.id, ${page.select} from media_asset m where m.title ilike ? and (?::text is null or m.kind = ?) and ${page.where} order by ${page.orderBy} limit ?`,
    [anywhere(q ?? ''), kind ?? null, kind ?? null, ...page.values, limit + 1],
  )
  const { rows: shown, next } = page.cut(rows, limit)
  const assets = await em.find(MediaAsset, { id: { $in: shown.map(row => row.id) } })
  return { items: await viewMedia(em, actor.id, shown.flatMap(row => assets.find(asset => asset.id === row.id) ?? [])), next }
}
