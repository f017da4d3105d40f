import { createTransport } from "nodemailer";
import { settings } from "../settings.server";

export interface Mail {
  to: string;
  subject: string;
  text: string;
}

export interface ReceivedMail extends Mail {
  at: Date;
}

// The local mailbox outlives a module reload in development, nothing else.
const kept = globalThis as typeof globalThis & { demiluneMailbox?: ReceivedMail[] };
kept.demiluneMailbox ??= [];
const mailbox = kept.demiluneMailbox;
const mailboxSize = 50;

/** The mails of the local mailbox, newest first; undefined where mail goes out by SMTP. */
export const readMailbox = (): readonly ReceivedMail[] | undefined =>
  settings().mail === "mailbox" ? mailbox : undefined;

const underWay = new Set<Promise<unknown>>();

/** Sends one mail to one address, by the way that the setting MAIL_URL chose. */
export async function sendMail(mail: Mail): Promise<void> {
  if (settings().mail === "mailbox") {
    mailbox.unshift({ ...mail, at: new Date() });
    mailbox.length = Math.min(mailbox.length, mailboxSize);
    return;
  }
  const transport = createTransport(settings().mail, { from: `Demilune <${settings().mailFrom}>` });
  const to = { name: "", address: mail.to };
  const sending = transport.sendMail({ ...mail, to, disableFileAccess: true, disableUrlAccess: true });
  underWay.add(sending);
  await sending.finally(() => underWay.delete(sending));
}

/** Resolves when every mail that is under way has gone or failed. */
export async function finishMails(): Promise<void> {
  await Promise.allSettled(underWay);
}
