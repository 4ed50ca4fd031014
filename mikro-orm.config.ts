import { dbConfig } from './server/db/config'

export default dbConfig(process.env.NUXT_DATABASE_URL)
