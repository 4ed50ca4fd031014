import { expect, type School } from './walk'

/** A message as the mail stand-in tells it. */
export interface Message { id: string, to: string[], subject: string, text: string, html: string }

/** Waits for a message to somebody (first name of the school, or an address) that has these words in its subject, asking the mail's own REST. */
export async function mailTo(school: School, who: string, subject: RegExp): Promise<Message> {
  const address = who.includes('@') ? who : `${who.toLowerCase()}@sallowbeck.example`
  const find = async (): Promise<Message | undefined> => {
    const answer = await fetch(`${school.mail.pageUrl}/api/messages?to=${encodeURIComponent(address)}`)
    const { items } = await answer.json() as { items: Message[] }
    return items.find(message => subject.test(message.subject))
  }
  await expect.poll(async () => (await find())?.subject ?? '', { timeout: 20_000, message: `mail to ${who} with ${subject}` }).toMatch(subject)
  return await find() as Message
}

/** The message as it came, with its files. */
export async function asItCame(school: School, message: Message): Promise<string> {
  return (await fetch(`${school.mail.pageUrl}/messages/${message.id}.eml`)).text()
}

/** The address in a message that begins with this path. */
export function linkIn(message: Message, path: string): string {
  const found = new RegExp(`https?://\\S+(${path}\\S*)`).exec(message.text)?.[1]
  if (!found) throw new Error(`"${message.subject}" has no link to ${path}:\n${message.text}`)
  return found
}
