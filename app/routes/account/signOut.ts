import { signOutAndRedirect } from "~/services/session.server";
import type { Route } from "./+types/signOut";

export const action = ({ context }: Route.ActionArgs) => signOutAndRedirect(context);
