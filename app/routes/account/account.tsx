import { data, Form, redirect } from "react-router";
import { z } from "zod";
import { Moment } from "~/components/ui/moment";
import { endSession, listSessions } from "~/models/sessions.server";
import { requireUser } from "~/services/authorisation.server";
import { actorContext } from "~/services/context.server";
import type { Route } from "./+types/account";

const intents = z.discriminatedUnion("intent", [
  z.strictObject({ intent: z.literal("endSession"), sessionId: z.string() }),
  z.strictObject({ intent: z.literal("endOtherSessions") }),
]);

export async function loader(args: Route.LoaderArgs) {
  const user = requireUser(args);
  const present = args.context.get(actorContext)?.session.id;
  const sessions = await listSessions(user.id);
  return {
    name: user.name,
    email: user.email,
    sessions: sessions.map(({ id, createdAt, lastSeenAt, userAgent, address }) => ({
      id,
      createdAt,
      lastSeenAt,
      userAgent,
      address,
      present: id === present,
    })),
  };
}

export async function action(args: Route.ActionArgs) {
  const user = requireUser(args);
  const intent = intents.safeParse(Object.fromEntries(await args.request.formData()));
  if (!intent.success) return data({ error: "This form is not one of ours." }, { status: 400 });
  if (intent.data.intent === "endSession") await endSession(user.id, intent.data.sessionId);
  else {
    const present = args.context.get(actorContext)?.session.id;
    for (const { id } of await listSessions(user.id)) if (id !== present) await endSession(user.id, id);
  }
  return redirect("/account", 303);
}

export const meta: Route.MetaFunction = () => [{ title: "Account · Demilune" }];

export default function Account({ loaderData: { name, email, sessions }, actionData }: Route.ComponentProps) {
  return (
    <div className="mx-auto max-w-3xl">
      <h1 className="font-semibold text-title">{name}</h1>
      <p className="mt-1 text-ink-soft">{email}</p>
      <h2 className="mt-6 font-semibold">Where you are signed in</h2>
      {actionData && (
        <p role="alert" className="mt-1 text-bad">
          {actionData.error}
        </p>
      )}
      <div className="mt-2 overflow-x-auto">
        <table className="table">
          <thead>
            <tr>
              <th scope="col">Browser</th>
              <th scope="col">Address</th>
              <th scope="col">Since</th>
              <th scope="col">Last seen</th>
              <th scope="col">
                <span className="sr-only">End it</span>
              </th>
            </tr>
          </thead>
          <tbody>
            {sessions.map((session) => (
              <tr key={session.id}>
                <td className="max-w-xs [overflow-wrap:anywhere]">{session.userAgent || "unknown"}</td>
                <td>{session.address}</td>
                <td>
                  <Moment at={session.createdAt} />
                </td>
                <td>
                  <Moment at={session.lastSeenAt} />
                </td>
                <td>
                  {session.present ? (
                    "this one"
                  ) : (
                    <Form method="post">
                      <input type="hidden" name="intent" value="endSession" />
                      <button type="submit" name="sessionId" value={session.id} className="action">
                        End
                      </button>
                    </Form>
                  )}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {sessions.length > 1 && (
        <Form method="post" className="mt-4">
          <button type="submit" name="intent" value="endOtherSessions" className="button-quiet">
            End all others
          </button>
        </Form>
      )}
    </div>
  );
}
