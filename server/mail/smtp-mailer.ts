/** Mail by SMTP through nodemailer. */
import { createTransport } from 'nodemailer';
import type { Mailer } from './mailer.ts';

export function smtpMailer(url: string, from: string): Mailer {
  const transport = createTransport(url);
  return {
    async send({ to, subject, text }) {
      await transport.sendMail({ from, to, subject, text });
    },
    async close() {
      transport.close();
    },
  };
}
