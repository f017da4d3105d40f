/** An SMTP server that keeps what it is given. */
import type { AddressInfo } from "node:net";
import { type ParsedMail, simpleParser } from "mailparser";
import { SMTPServer } from "smtp-server";

export interface FakeMailServer {
  url: string;
  mails: (ParsedMail & { recipients: string[] })[];
  /** Waits for the next mail to this address that was not taken yet. */
  take(address: string): Promise<ParsedMail>;
  stop(): Promise<void>;
}

export async function startMailServer(): Promise<FakeMailServer> {
  const mails: FakeMailServer["mails"] = [];
  const taken = new Set<ParsedMail>();
  let arrived = () => {};
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ["STARTTLS"],
    onData(stream, session, done) {
      simpleParser(stream)
        .then((mail) => {
          mails.push(Object.assign(mail, { recipients: session.envelope.rcptTo.map((to) => to.address) }));
          arrived();
          done();
        })
        .catch(done);
    },
  });
  // A client that goes away in the middle of a mail is its own affair.
  server.on("error", () => {});
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  return {
    url: `smtp://127.0.0.1:${(server.server.address() as AddressInfo).port}`,
    mails,
    async take(address) {
      for (;;) {
        const mail = mails.find((candidate) => !taken.has(candidate) && candidate.recipients.includes(address));
        if (mail) {
          taken.add(mail);
          return mail;
        }
        await new Promise<void>((resolve) => {
          arrived = resolve;
        });
      }
    },
    stop: () => new Promise((resolve) => server.close(() => resolve())),
  };
}

/** The code in a sign-in mail, without its space. */
export function codeIn(mail: ParsedMail): string {
  const code = /\b(\d{4}) (\d{4})\b/.exec(mail.text ?? "");
  if (!code) throw new Error(`No code in this mail: ${mail.text}`);
  return code[1] + code[2];
}
