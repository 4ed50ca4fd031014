import type { MikroORM } from '@mikro-orm/postgresql'
import type { Storage } from '#server/adapters/storage/storage'
import { SchoolSetting } from '#server/db/entities/SchoolSetting'
import { User } from '#server/db/entities/User'
import { DemoSeeder } from '#server/db/seeders/DemoSeeder'
import { readContent } from '#server/db/seeders/content'
import { sealAudit } from '#server/services/audit/seal-audit'
import type { Config } from '#server/utils/config'
import { hashPassword } from '#server/utils/passwords'
import { seedClips } from './seed-clips'
import { paperHeads } from './paper-heads'
import { playPaper } from './play-paper'
import { seedPassages } from './seed-passages'
import { storyPictures } from './pictures'
import { loadActors, play } from './play'
import { story } from './story'
import { openStoryApp } from './story-app'
import type { StoryHead } from './story-parts'

export type Seeded = 'seeded' | 'already seeded' | 'other people'

/**
 * Fills an empty, migrated database with the demo school as it stands at an instant, and storage with its evidence. A database with
 * people in it is left alone, whoever they are.
 *
 * @param given.heads whose stories are told; everybody's when left out
 */
export async function seedSchool(given: { orm: MikroORM, config: Config, storage: Storage, until: Date, heads?: readonly StoryHead[] }): Promise<Seeded> {
  const { orm, config, storage, until, heads = story } = given
  const em = orm.em.fork()
  if (await em.count(User) > 0) return await em.count(SchoolSetting, { name: 'demo-clock' }) > 0 ? 'already seeded' : 'other people'
  const { password } = readContent().start
  // Before the lessons, which show them.
  await seedClips(orm.em.fork(), storage, new Date('2025-09-01T00:00:00Z'))
  await new DemoSeeder().run(em, { until, passwordHash: await hashPassword(password), seededAt: new Date() })
  await seedPassages(orm.em.fork())
  const opened = await openStoryApp(config, { orm, storage })
  const player = { story: opened, pictures: storyPictures(opened.app), actors: await loadActors(orm.em.fork()) }
  await playPaper(player, paperHeads, until)
  await play(player, heads, until)
  await sealAudit(orm.em.fork(), 'minute')
  // The school's clock starts when the story has been told, not when its telling began.
  await orm.em.fork().nativeUpdate(SchoolSetting, { name: 'demo-clock' }, { value: { demoNow: until.toISOString(), seededAt: new Date().toISOString() } })
  return 'seeded'
}
