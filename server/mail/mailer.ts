import { createTransport } from 'nodemailer';
import type { Mailer } from '../app-context.js';
import type { Config } from '../config/config.js';

/** Without SMTP_URL nothing is sent: mails wait in the outbox, and links are handed over by the person who made them. */
const noMailer: Mailer = {
  send: () => Promise.reject(new Error('No mail server is set up (SMTP_URL).')),
  close: () => undefined,
};

/** Sends plain text mails over SMTP. The address may carry nodemailer's options, such as `?ignoreTLS=true`. */
export function createMailer(config: Pick<Config, 'smtpUrl' | 'mailFrom'>): Mailer {
  if (config.smtpUrl === null) return noMailer;
  const transport = createTransport(config.smtpUrl, { from: config.mailFrom });
  return {
    send: async ({ to, subject, text }) => {
      await transport.sendMail({ to, subject, text });
    },
    close: () => {
      transport.close();
    },
  };
}
