import { setTimeout as wait } from 'node:timers/promises'
import type { EntityManager } from '@mikro-orm/postgresql'
import { User } from '#server/db/entities/User'
import { firstName } from '#server/services/mail/first-name'
import { renderLetter } from '#server/services/mail/render-letter'
import { passwordReset } from '#server/services/mail/templates/password-reset'
import { writeMail } from '#server/services/mail/write-mail'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { issuePasswordLink } from './issue-password-link'
import { countResetWish } from './reset-throttle'

/** Every answer takes this long, so that the few milliseconds more that a known address costs tell nothing. */
const answerAfterMs = 250

/**
 * Sends a link to set a new password to the person with that e-mail. Says nothing about whether there is one.
 *
 * @throws {Refusal} too_many_tries
 */
export async function askForReset(em: EntityManager, app: App, email: string, address: string): Promise<void> {
  await countResetWish(em.fork(), email, address, new Date())
  await Promise.all([wait(answerAfterMs), send(em, app, email)])
}

async function send(em: EntityManager, app: App, email: string): Promise<void> {
  const user = await em.findOne(User, { email })
  if (!user) {
    await renderLetter(passwordReset({ first: 'nobody', url: app.config.publicUrl }))
    return
  }
  await em.transactional(async (tx) => {
    const link = await issuePasswordLink(tx, app.config.publicUrl, user.id, 'reset')
    await writeMail(tx, app, { key: `password-reset:${link.id}`, template: 'password-reset', to: user, letter: passwordReset({ first: firstName(user.name), url: link.url }) })
    recordEvent(tx, { actor: user.id, action: 'password-link-sent', subject: `person:${user.id}` })
  })
}
