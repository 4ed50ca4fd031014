import { expect, type School } from './walk'

/** A message as the mail stand-in tells it. */
export interface Message { id: string, to: string[], subject: string, text: string }

/** Waits for a message to somebody that has these words in its subject, asking the mail's own REST. */
export async function mailTo(school: School, firstName: string, subject: RegExp): Promise<Message> {
  const find = async (): Promise<Message | undefined> => {
    const answer = await fetch(`${school.mail.pageUrl}/api/messages?to=${firstName.toLowerCase()}@sallowbeck.example`)
    const { items } = await answer.json() as { items: Message[] }
    return items.find(message => subject.test(message.subject))
  }
  await expect.poll(async () => (await find())?.subject ?? '', { timeout: 20_000, message: `mail to ${firstName} with ${subject}` }).toMatch(subject)
  return await find() as Message
}
