import { openDB, type DBSchema, type IDBPDatabase } from 'idb'
import type { OutboxItem } from './outbox-item'

interface Device extends DBSchema {
  outbox: { key: string, value: OutboxItem, indexes: { person: string } }
  drafts: { key: string, value: { key: string, person: string, value: unknown, keptAt: number } }
}

/** This browser's own database: what is here survives a reload and a dead battery. Opened anew by whoever needs it; the browser shares the connection. */
export function openDevice(): Promise<IDBPDatabase<Device>> {
  return openDB<Device>('witness-mark', 1, {
    upgrade(database) {
      database.createObjectStore('outbox', { keyPath: 'id' }).createIndex('person', 'person')
      database.createObjectStore('drafts', { keyPath: 'key' })
    },
  })
}
