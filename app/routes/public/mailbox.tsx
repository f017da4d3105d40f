import { Moment } from "~/components/ui/moment";
import { notFound } from "~/services/authorisation.server";
import { readMailbox } from "~/services/mail/mail.server";
import type { Route } from "./+types/mailbox";

/** Stands in for a mail server on one's own computer; does not exist where mail goes out. */
export async function loader() {
  const mails = readMailbox();
  if (!mails) throw notFound();
  return { mails };
}

export const meta: Route.MetaFunction = () => [{ title: "Mailbox · Demilune" }];

/** Addresses in a mail become links, and nothing else does. */
function MailText({ text }: { text: string }) {
  const parts = text.split(/(https?:\/\/\S+)/);
  return (
    <p className="mt-2 whitespace-pre-line [overflow-wrap:anywhere]">
      {parts.map((part) =>
        part.startsWith("http") ? (
          <a key={part} href={part} className="link">
            {part}
          </a>
        ) : (
          part
        ),
      )}
    </p>
  );
}

export default function Mailbox({ loaderData: { mails } }: Route.ComponentProps) {
  return (
    <div className="mx-auto max-w-2xl">
      <h1 className="font-semibold text-title">Mailbox</h1>
      <p className="mt-1 text-ink-soft">Mail sent by this server, newest first. Nothing leaves this computer.</p>
      {mails.length === 0 && <p className="mt-4">No mail yet. Ask for a sign-in code and it appears here.</p>}
      {mails.map((mail) => (
        <article key={mail.at.getTime() + mail.to} className="mt-4 border-line border-t pt-3">
          <h2 className="font-semibold">{mail.subject}</h2>
          <p className="text-ink-soft text-small">
            to {mail.to}, <Moment at={mail.at} />
          </p>
          <MailText text={mail.text} />
        </article>
      ))}
    </div>
  );
}
