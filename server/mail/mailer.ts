/** Outgoing mail. The transport is SMTP through nodemailer; demo and tests send to the inbox of mail/demo-inbox.ts by SMTP too. */
export interface Letter {
  to: string;
  subject: string;
  text: string;
}

export interface Mailer {
  send(letter: Letter): Promise<void>;
  close(): Promise<void>;
}
