import { mkdir, rename, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import nodemailer from 'nodemailer'

export interface Outgoing {
  messageId: string
  to: string
  replyTo?: string
  subject: string
  body: string
  date: Date
}

export interface Transport {
  send(mail: Outgoing): Promise<void>
}

const from = 'Brimline <no-reply@tallowmere.example>'

const compose = (mail: Outgoing) => ({
  from,
  to: mail.to,
  replyTo: mail.replyTo,
  subject: mail.subject,
  text: mail.body,
  date: mail.date,
  messageId: `<${mail.messageId}@brimline>`,
})

/** Real mail, by SMTP_URL. */
export function smtpTransport(url: string): Transport {
  const mailer = nodemailer.createTransport(url)
  return {
    async send(mail) {
      await mailer.sendMail(compose(mail))
    },
  }
}

/** The local catcher: each message becomes one .eml file named after its key, so a repeat overwrites itself. */
export function fileTransport(dataDir: string): Transport {
  const folder = join(dataDir, 'mail')
  const mailer = nodemailer.createTransport({ streamTransport: true, buffer: true })
  return {
    async send(mail) {
      await mkdir(folder, { recursive: true })
      const composed = await mailer.sendMail(compose(mail))
      const name = `${mail.messageId.replace(/[^A-Za-z0-9.-]/g, '_')}.eml`
      await writeFile(join(folder, `.${name}`), composed.message as Buffer)
      await rename(join(folder, `.${name}`), join(folder, name))
    },
  }
}
