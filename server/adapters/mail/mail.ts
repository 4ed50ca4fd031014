export interface OutgoingMail {
  /** The same at every try, so that a message that arrives twice can be known as one. Without angle brackets. */
  messageId: string
  to: string
  subject: string
  html: string
  text: string
  /** Files that go with it, whole. */
  attachments?: { filename: string, contentType: string, content: Uint8Array }[]
}

/** `retry`: the other side may take it later. `dead`: it never will. */
export type MailResult
  = { state: 'sent', providerId: string }
    | { state: 'retry', problem: string }
    | { state: 'dead', problem: string }

export interface MailSender {
  /** Never throws for what the mail server says or does; the answer tells. */
  send: (mail: OutgoingMail) => Promise<MailResult>
  close: () => void
}
