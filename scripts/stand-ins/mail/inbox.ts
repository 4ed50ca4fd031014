import { mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { simpleParser } from 'mailparser'
import { writeDurably } from '../write-durably'

export type Message = {
  /** Twelve digits that only grow, so that the order of ids is the order of arrival. */
  id: string
  receivedAt: string
  from: string
  /** Whom the envelope named, in lower case. */
  to: string[]
  subject: string
  messageId: string
  text: string
  html: string
}

/** Every message that was taken, as it came (.eml) and as it reads (.json), in one folder. */
export class Inbox {
  private readonly messages: Message[] = []

  constructor(private readonly dir: string) {
    mkdirSync(dir, { recursive: true })
    for (const name of readdirSync(dir).filter(file => file.endsWith('.json')).sort()) {
      this.messages.push(JSON.parse(readFileSync(join(dir, name), 'utf8')) as Message)
    }
  }

  async keep(raw: Buffer, envelope: { from: string, to: string[] }, now: Date): Promise<Message> {
    const parsed = await simpleParser(raw)
    // Taken after the await: two messages at once must not get one number.
    const id = String(Number(this.messages.at(-1)?.id ?? 0) + 1).padStart(12, '0')
    const message: Message = {
      id,
      receivedAt: now.toISOString(),
      from: envelope.from,
      to: envelope.to.map(address => address.toLowerCase()),
      subject: parsed.subject ?? '',
      messageId: parsed.messageId ?? '',
      text: parsed.text ?? '',
      html: parsed.html || '',
    }
    writeFileSync(join(this.dir, `${id}.eml`), raw)
    writeDurably(join(this.dir, `${id}.json`), JSON.stringify(message, null, 2))
    this.messages.push(message)
    return message
  }

  /** @param after an id: only what came later */
  list({ to, after }: { to?: string, after?: string }): Message[] {
    return this.messages.filter(message => (!to || message.to.includes(to.toLowerCase())) && (!after || message.id > after))
  }

  find(id: string): Message | undefined {
    return this.messages.find(message => message.id === id)
  }

  raw(id: string): Buffer | null {
    return this.find(id) ? readFileSync(join(this.dir, `${id}.eml`)) : null
  }

  clear() {
    for (const message of this.messages.splice(0)) for (const ending of ['eml', 'json']) rmSync(join(this.dir, `${message.id}.${ending}`), { force: true })
  }
}
