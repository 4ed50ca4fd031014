import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant, jsonOnce } from './column'
import { User } from './User'

export interface ConsentClause { code: string, title: string, text: string, /** Changing it asks everybody again. */ safety: boolean }
export interface ConsentChoice { code: string, text: string }

/** The safety and consent text, a version at a time; never changed once people may have ticked it. */
export const ConsentText = defineEntity({
  name: 'ConsentText',
  properties: {
    id: id(),
    version: p.integer().unique(),
    clauses: jsonOnce<ConsentClause[]>(),
    /** Sharing people may say yes or no to, any day. */
    choices: jsonOnce<ConsentChoice[]>(),
    /** The oldest version whose ticks still stand: no safety clause changed since. */
    standsFrom: p.integer(),
    savedBy: () => p.manyToOne(User).ref().nullable(),
    savedAt: instant(),
  },
})
export type ConsentText = InferEntity<typeof ConsentText>

/** That a person read and ticked a version of the text. */
export const Consent = defineEntity({
  name: 'Consent',
  properties: {
    id: id(),
    person: () => p.manyToOne(User).ref(),
    text: () => p.manyToOne(ConsentText).ref(),
    /** Codes ticked. */
    ticks: p.array(),
    /** Name as typed under it. */
    signedAs: p.string().length(120),
    /** Under 18: the guardian's name too. */
    guardian: p.string().length(120).nullable(),
    at: instant(),
  },
  uniques: [{ properties: ['person', 'text'] }],
})
export type Consent = InferEntity<typeof Consent>

/** A person's yes or no to one kind of sharing, from a moment on; the newest row counts. */
export const SharingChoice = defineEntity({
  name: 'SharingChoice',
  properties: {
    id: id(),
    person: () => p.manyToOne(User).ref(),
    code: p.string().length(40),
    allowed: p.boolean(),
    at: instant(),
  },
  indexes: [{ properties: ['person', 'code', 'at'] }],
})
export type SharingChoice = InferEntity<typeof SharingChoice>

/** What the shop keeps about a person's body; theirs to change or empty any day, so it is no part of what was signed. */
export const SafetyNote = defineEntity({
  name: 'SafetyNote',
  properties: {
    id: id(),
    person: () => p.manyToOne(User).ref().unique(),
    /** First-aid information; only the safety officer reads it. */
    firstAid: p.text().default(''),
    /** As people say it: "9", "42.5". */
    bootSize: p.string().length(10).default(''),
    changedAt: instant(),
  },
})
export type SafetyNote = InferEntity<typeof SafetyNote>
