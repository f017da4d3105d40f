import { data, href, redirect } from "react-router";
import { consume } from "~/models/rateLimits.server";
import { countOpening, findShare } from "~/models/shares.server";
import { requestContext } from "~/services/context.server";
import { limits } from "~/services/limits.server";
import { log } from "~/services/log.server";
import { goneOrUnknown, shareCookie } from "~/services/shareAccess.server";
import type { Route } from "./+types/open";

const tooOften = () =>
  data("Too many share links were opened from here; wait a minute and try again.", {
    status: 429,
    headers: { "Retry-After": "60" },
  });

/** Takes the secret out of the address at once: into a cookie, and on to an address that holds none. */
export async function loader({ context, params }: Route.LoaderArgs) {
  const { address, id: reqId } = context.get(requestContext);
  if (!(await consume(`share:${address}`, limits.shareLink.client))) throw tooOften();
  const found = await findShare(params.token);
  if (found.state !== "open") {
    log.info({ event: "shareRefused", reqId, state: found.state });
    if (found.state === "unknown" && !(await consume(`shareUnknown:${address}`, limits.shareLink.unknown)))
      throw tooOften();
    throw goneOrUnknown(found.state);
  }
  const { share } = found;
  await countOpening(share.id);
  log.info({ event: "shareOpened", reqId, shareId: share.id });
  const seconds = Math.ceil((share.expiresAt.getTime() - Date.now()) / 1000);
  return redirect(href("/shared/:shareId", { shareId: share.id }), {
    status: 303,
    headers: { "Set-Cookie": await shareCookie(share.id, seconds).serialize(params.token) },
  });
}

export const headers: Route.HeadersFunction = ({ errorHeaders }) => errorHeaders ?? new Headers();

/** Never shown: the loader leads on or refuses. It is here so that a refusal is a page. */
export default function OpenShare() {
  return null;
}
