/** How a guest gets to what a share link shows: the secret once in the address, then in a cookie for that link alone. */
import { data } from "react-router";
import { findShare, type Share, type ShareState } from "~/models/shares.server";
import { notFound } from "./authorisation.server";
import { siteCookie } from "./session.server";

const isId = (text: string) => /^[0-9A-Z]{26}$/.test(text);

/** The cookie of one link; it lives as long as the link. */
export const shareCookie = (shareId: string, seconds: number) => siteCookie(`share-${shareId}`, seconds);

/** Says in a plain page why a link shows nothing any more. */
export function goneOrUnknown(state: Exclude<ShareState["state"], "open">) {
  if (state === "unknown") return data("This share link is not known here.", { status: 404 });
  const reason =
    state === "expired" ? "This share link has expired." : "This share link was revoked by the lab that made it.";
  return data(`${reason} Ask whoever sent it for a new one.`, { status: 410 });
}

/**
 * The share that a guest's browser may open.
 * @throws 404 without the link's cookie, 410 after its end
 */
export async function requireShare(request: Request, shareId: string): Promise<Share> {
  const token: unknown = isId(shareId) ? await shareCookie(shareId, 0).parse(request.headers.get("cookie")) : null;
  if (typeof token !== "string") throw notFound();
  const found = await findShare(token);
  if (found.state !== "open") throw goneOrUnknown(found.state);
  if (found.share.id !== shareId) throw notFound();
  return found.share;
}
