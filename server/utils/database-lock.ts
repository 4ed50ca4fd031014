import pg from 'pg'

/** Runs `work` while holding an advisory lock on a connection of its own, so that two processes never migrate or create queues at once. */
export async function withDatabaseLock<T>(databaseUrl: string, work: () => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: databaseUrl })
  await client.connect()
  try {
    await client.query('select pg_advisory_lock(7240191)')
    return await work()
  }
  finally {
    await client.end()
  }
}
