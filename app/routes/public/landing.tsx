import { Form, href, Link, useFetcher } from "react-router";
import { Field } from "~/components/ui/field";
import { listLabsOf } from "~/models/labs.server";
import type { action as startLab } from "~/routes/account/newLab";
import { actorContext } from "~/services/context.server";
import { settings } from "~/services/settings.server";
import type { Route } from "./+types/landing";

export async function loader({ context }: Route.LoaderArgs) {
  const actor = context.get(actorContext);
  const { demo, signUp } = settings();
  return { demo, signedIn: actor !== null, mayStart: signUp, labs: actor ? await listLabsOf(actor.user.id) : [] };
}

export default function Landing({ loaderData: { demo, signedIn, mayStart, labs } }: Route.ComponentProps) {
  return (
    <div className="mx-auto max-w-2xl">
      <h1 className="font-semibold text-display">Which process makes each arc</h1>
      <p className="mt-3 text-large">
        Enter a layer stack and its operating point, predict IMPS, IMVS and impedance from one model of the device, move
        a parameter and see which arc moves, and lay the prediction over what was measured.
      </p>
      {labs.length > 0 && (
        <section aria-labelledby="labs" className="mt-8">
          <h2 id="labs" className="font-semibold text-large">
            Your labs
          </h2>
          <ul className="mt-2">
            {labs.map((lab) => (
              <li key={lab.id} className="border-line border-t py-2">
                <Link to={href("/lab/:labId", { labId: lab.id })} className="link font-semibold">
                  {lab.name}
                </Link>
                <span className="ml-3 text-ink-soft">{lab.role}</span>
              </li>
            ))}
          </ul>
        </section>
      )}
      {signedIn && labs.length === 0 && (
        <p className="mt-8">
          You belong to no lab yet. An owner of one can let you in{mayStart && ", or you start one of your own"}.
        </p>
      )}
      {!signedIn && (
        <p className="mt-6">
          <Link to="/sign-in" className={demo ? "link" : "button"}>
            Sign in
          </Link>{" "}
          with a code sent by e-mail.
        </p>
      )}
      {demo && (
        <section aria-labelledby="demo" className="mt-8">
          <h2 id="demo" className="font-semibold text-large">
            Look around in the demo
          </h2>
          <p className="mt-1">
            The lab, its people and its data are invented. One click lets you in; what you change stays on this
            computer.
          </p>
          <Form method="post" action="/demo" className="mt-3 flex flex-wrap gap-3">
            <button type="submit" name="role" value="researcher" className="button">
              Enter as researcher
            </button>
            <button type="submit" name="role" value="owner" className="button-quiet">
              as owner
            </button>
            <button type="submit" name="role" value="viewer" className="button-quiet">
              as viewer
            </button>
          </Form>
        </section>
      )}
      {signedIn && mayStart && <StartLab />}
    </div>
  );
}

function StartLab() {
  const fetcher = useFetcher<typeof startLab>();
  return (
    <section aria-labelledby="start" className="mt-8">
      <h2 id="start" className="font-semibold text-large">
        Start a lab of your own
      </h2>
      <fetcher.Form method="post" action="/labs/new" className="mt-2 grid max-w-sm gap-3">
        <Field
          name="name"
          label="Name of the lab"
          autoComplete="organization"
          required
          maxLength={80}
          defaultValue={fetcher.data?.typed}
          error={fetcher.data?.error}
        />
        <button type="submit" className="button-quiet justify-self-start">
          Start the lab
        </button>
      </fetcher.Form>
    </section>
  );
}
