import { data, Form, redirect } from "react-router";
import { Field } from "~/components/ui/field";
import { actorContext, requestContext } from "~/services/context.server";
import { safeRedirect } from "~/services/redirects.server";
import { challengeCookie } from "~/services/session.server";
import { settings } from "~/services/settings.server";
import { askForCode } from "~/services/signIn.server";
import type { Route } from "./+types/signIn";

export async function loader({ request, context }: Route.LoaderArgs) {
  const to = safeRedirect(new URL(request.url).searchParams.get("to"));
  if (context.get(actorContext)) throw redirect(to);
  return { to, mailbox: settings().mail === "mailbox" };
}

export async function action({ request, context }: Route.ActionArgs) {
  const form = await request.formData();
  const email = String(form.get("email") ?? "");
  const asked = await askForCode(email, safeRedirect(form.get("to")), context.get(requestContext).address);
  if (asked.outcome === "asked")
    return redirect("/sign-in/code", {
      status: 303,
      headers: { "Set-Cookie": await challengeCookie().serialize(asked.challengeId) },
    });
  if (asked.outcome === "notAnAddress")
    return data({ email, error: `“${email}” is not an e-mail address of the form name@example.org.` }, { status: 400 });
  return data(
    { email, error: "Too many codes were asked for. Wait a while, or use the code that was sent last." },
    { status: 429, headers: { "Retry-After": "600" } },
  );
}

export const meta: Route.MetaFunction = () => [{ title: "Sign in · Demilune" }];

export default function SignIn({ loaderData: { to, mailbox }, actionData }: Route.ComponentProps) {
  return (
    <div className="mx-auto max-w-sm">
      <h1 className="font-semibold text-title">Sign in</h1>
      <Form method="post" className="mt-4 grid gap-4">
        <input type="hidden" name="to" value={to} />
        <Field
          name="email"
          label="E-mail address"
          help="A code of eight digits is sent to it."
          type="text"
          inputMode="email"
          autoComplete="email"
          autoCapitalize="off"
          spellCheck={false}
          required
          defaultValue={actionData?.email}
          error={actionData?.error}
        />
        <button type="submit" className="button justify-self-start">
          Send the code
        </button>
      </Form>
      {mailbox && (
        <p className="mt-6 text-ink-soft">
          Mail stays on this computer: what is sent is found in the mailbox at the top of the page.
        </p>
      )}
    </div>
  );
}
