/** A sealer that seals without pause, to be killed by `npm run audit:stress` at moments it does not choose. */
import { MikroORM } from '@mikro-orm/postgresql'
import { dbConfig } from '../../server/db/config'
import { sealAudit } from '../../server/services/audit/seal-audit'

const orm = await MikroORM.init(dbConfig(process.env.NUXT_DATABASE_URL))
process.stdout.write('sealing\n')
for (;;) await sealAudit(orm.em.fork(), 'minute')
