import { data, Form, Link } from "react-router";
import { Field } from "~/components/ui/field";
import { requestContext } from "~/services/context.server";
import { challengeCookie, signInAndRedirect } from "~/services/session.server";
import { checkCode } from "~/services/signIn.server";
import type { Route } from "./+types/signInCode";

const messages = {
  wrong: "That is not the code that was sent. Look again, or ask for a new one.",
  ended:
    "This code is no longer good: it was used, is older than ten minutes, was tried too often, or was asked for in another browser.",
  tooOften: "Too many codes were tried. Wait ten minutes and ask for a new one.",
};

/** The link in the mail leads here and fills the field; only the button signs in, because mail scanners open links. */
export async function loader({ request }: Route.LoaderArgs) {
  const code = new URL(request.url).searchParams.get("code") ?? "";
  return { code: /^\d{8}$/.test(code) ? `${code.slice(0, 4)} ${code.slice(4)}` : "" };
}

export async function action({ request, context }: Route.ActionArgs) {
  const typed = (await request.formData()).get("code");
  const challengeId: unknown = await challengeCookie().parse(request.headers.get("cookie"));
  const checked =
    typeof challengeId === "string"
      ? await checkCode(challengeId, typed, context.get(requestContext).address)
      : ({ outcome: "ended" } as const);
  if (checked.outcome !== "signedIn")
    return data(
      { typed: String(typed ?? ""), error: messages[checked.outcome] },
      { status: checked.outcome === "tooOften" ? 429 : 400 },
    );
  const headers = new Headers({ "Set-Cookie": await challengeCookie().serialize("", { maxAge: 0 }) });
  return signInAndRedirect({ request, context }, checked.user.id, checked.redirectTo, headers);
}

export const meta: Route.MetaFunction = () => [{ title: "Code · Demilune" }];

export default function SignInCode({ loaderData: { code }, actionData }: Route.ComponentProps) {
  return (
    <div className="mx-auto max-w-sm">
      <h1 className="font-semibold text-title">Look into your mail</h1>
      <p className="mt-2">If this address may sign in here, a code is on its way to it. It is good for ten minutes.</p>
      <Form method="post" action="/sign-in/code" className="mt-4 grid gap-4">
        <Field
          name="code"
          label="Code"
          help="Eight digits; spaces do not matter."
          inputMode="numeric"
          autoComplete="one-time-code"
          required
          defaultValue={actionData?.typed ?? code}
          error={actionData?.error}
        />
        <div className="flex items-center gap-5">
          <button type="submit" className="button">
            Sign in
          </button>
          <Link to="/sign-in" className="link">
            Send a new code
          </Link>
        </div>
      </Form>
    </div>
  );
}
