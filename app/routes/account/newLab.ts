import { data, redirect } from "react-router";
import { createLab } from "~/models/labs.server";
import { notFound, requireUser } from "~/services/authorisation.server";
import { settings } from "~/services/settings.server";
import type { Route } from "./+types/newLab";

/** Starts a lab of one's own, where the server allows that (SIGN_UP). */
export async function action(args: Route.ActionArgs) {
  const user = requireUser(args);
  if (!settings().signUp) throw notFound();
  const typed = String((await args.request.formData()).get("name") ?? "");
  const name = typed.normalize("NFKC").trim();
  if (name === "" || name.length > 80 || /\p{Cc}/u.test(name))
    return data({ typed, error: "A lab's name has 1 to 80 characters on one line." }, { status: 400 });
  const lab = await createLab(name, [{ userId: user.id, role: "owner" }]);
  return redirect(`/lab/${lab.id}`, 303);
}
