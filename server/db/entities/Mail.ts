import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant, jsonOnce } from './column'
import { User } from './User'

/** The outbox: every message the school sends, its state and the provider's id. */
export const Mail = defineEntity({
  name: 'Mail',
  properties: {
    id: id(),
    /** Says the same message once: "hold-released:<review>". */
    key: p.string().length(160).unique(),
    template: p.string().length(60),
    person: () => p.manyToOne(User).ref().nullable(),
    to: p.string().length(254),
    subject: p.string().length(200),
    html: p.text(),
    text: p.text(),
    /** Files that go with it, by their keys in storage. */
    attachments: jsonOnce<{ filename: string, key: string, contentType: string }[]>().nullable(),
    state: p.enum(['waiting', 'sent', 'dead'] as const).default('waiting'),
    tries: p.integer().default(0),
    messageId: p.string().length(200),
    providerId: p.text().nullable(),
    problem: p.text().nullable(),
    createdAt: instant(),
    sentAt: instant().nullable(),
  },
  indexes: [{ properties: ['state', 'createdAt'] }, { properties: ['person'] }],
})
export type Mail = InferEntity<typeof Mail>
