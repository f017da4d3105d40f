/**
 * Who may do what. `can…` asks, `require…` throws. Every loader and action opens with one of them; the lab's id goes
 * into the WHERE of every query besides. What is not found and what is not yours are both 404.
 */
import { data, type RouterContextProvider, redirect } from "react-router";
import { findMembership, type Lab, type Role } from "~/models/labs.server";
import type { User } from "~/models/users.server";
import { actorContext, requestContext } from "./context.server";
import { log } from "./log.server";

const rank: Record<Role, number> = { viewer: 0, researcher: 1, owner: 2 };

/** Whether somebody in this role may do what needs the other role. */
export const canActAs = (role: Role, needed: Role): boolean => rank[role] >= rank[needed];

interface Arguments {
  request: Request;
  context: Readonly<RouterContextProvider>;
}

/**
 * The signed-in user.
 * @throws a redirect to the sign-in page, which leads back here.
 */
export function requireUser({ request, context }: Arguments): User {
  const actor = context.get(actorContext);
  if (actor) return actor.user;
  const url = new URL(request.url);
  const to = request.method === "GET" ? `?to=${encodeURIComponent(url.pathname + url.search)}` : "";
  throw redirect(`/sign-in${to}`, 303);
}

/** 404, for what does not exist and for what belongs to somebody else. */
export const notFound = () => data("Nothing is kept under this address.", { status: 404 });

export interface LabAccess {
  lab: Lab;
  role: Role;
  user: User;
}

/**
 * The lab of `params.labId`, with the user and their role, read from the database at each request.
 * @param needed the least role that may do this
 * @throws a redirect to sign-in for visitors, 404 for people outside the lab, 403 for a role that is too low.
 */
export async function requireLab(
  { request, context, params }: Arguments & { params: { labId: string } },
  needed: Role = "viewer",
): Promise<LabAccess> {
  const user = requireUser({ request, context });
  const membership = await findMembership(params.labId, user.id);
  if (!membership) {
    log.info({ event: "denied", reqId: context.get(requestContext).id, actorId: user.id, labId: params.labId });
    throw notFound();
  }
  if (!canActAs(membership.role, needed)) {
    log.info({ event: "denied", reqId: context.get(requestContext).id, actorId: user.id, labId: params.labId, needed });
    throw data(`Your role in this lab is ${membership.role}; this needs the role ${needed}.`, { status: 403 });
  }
  return { ...membership, user };
}
