import { redirect } from "react-router";
import { setTheme } from "~/models/users.server";
import { actorContext } from "~/services/context.server";
import { safeRedirect } from "~/services/redirects.server";
import { themeCookie, themeSchema } from "~/services/theme.server";
import type { Route } from "./+types/theme";

export async function action({ request, context }: Route.ActionArgs) {
  const form = await request.formData();
  const theme = themeSchema.catch("auto").parse(form.get("theme"));
  const actor = context.get(actorContext);
  if (actor) await setTheme(actor.user.id, theme);
  return redirect(safeRedirect(form.get("to")), {
    status: 303,
    headers: { "Set-Cookie": await themeCookie.serialize(theme) },
  });
}
