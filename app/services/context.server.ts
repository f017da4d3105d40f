/** What the edge and the root middleware hand to every loader and action. */
import { createContext } from "react-router";
import type { Session } from "~/models/sessions.server";
import type { User } from "~/models/users.server";

/** Set by the edge. The defaults serve tests that call a loader directly. */
export const requestContext = createContext<{ id: string; nonce: string | undefined; address: string }>({
  id: "none",
  nonce: undefined,
  address: "",
});

/** Who is asking; null for a visitor. Set by the root middleware. */
export const actorContext = createContext<{ session: Session; user: User } | null>(null);
