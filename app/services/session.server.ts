import { createCookie, type RouterContextProvider, redirect } from "react-router";
import { createSession, endSession, findSession } from "~/models/sessions.server";
import { actorContext, requestContext } from "./context.server";
import { settings } from "./settings.server";
import { codeLifetimeMs } from "./signIn.server";

/**
 * A cookie of ours: HttpOnly, Lax, for the whole site and this host alone. Over https the `__Host-` prefix makes the
 * browser hold us to that; over plain http on loopback it would refuse such a cookie, so the name goes without.
 */
export function siteCookie(name: string, maxAge: number) {
  const { secure } = settings();
  return createCookie(secure ? `__Host-${name}` : name, { httpOnly: true, sameSite: "lax", path: "/", secure, maxAge });
}

const sessionCookie = () => siteCookie("sid", settings().sessionMs / 1000);

/** Holds the id of the challenge whose code was sent; ten minutes, like the code. */
export const challengeCookie = () => siteCookie("login", codeLifetimeMs / 1000);

/** Root middleware: finds out who is asking, once per request. */
export async function identifyActor({
  request,
  context,
}: {
  request: Request;
  context: Readonly<RouterContextProvider>;
}) {
  const token: unknown = await sessionCookie().parse(request.headers.get("cookie"));
  context.set(actorContext, typeof token === "string" ? ((await findSession(token)) ?? null) : null);
}

/** Starts a new session, always with a new token, and says where to go. The session one came with ends. */
export async function signInAndRedirect(
  { request, context }: { request: Request; context: Readonly<RouterContextProvider> },
  userId: string,
  to: string,
  headers = new Headers(),
) {
  const before = context.get(actorContext);
  if (before) await endSession(before.user.id, before.session.id);
  const token = await createSession(userId, {
    userAgent: request.headers.get("user-agent") ?? "",
    address: context.get(requestContext).address,
  });
  headers.append("Set-Cookie", await sessionCookie().serialize(token));
  return redirect(to, { status: 303, headers });
}

/** Ends the session on the server and has the browser forget what it kept of us. */
export async function signOutAndRedirect(context: Readonly<RouterContextProvider>) {
  const actor = context.get(actorContext);
  if (actor) await endSession(actor.user.id, actor.session.id);
  return redirect("/", {
    status: 303,
    headers: {
      "Set-Cookie": await sessionCookie().serialize("", { maxAge: 0 }),
      "Clear-Site-Data": '"cache", "storage"',
    },
  });
}
