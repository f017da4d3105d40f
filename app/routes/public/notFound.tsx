import { notFound } from "~/services/authorisation.server";

export function loader() {
  throw notFound();
}

export function action() {
  throw notFound();
}

/** Never shown: the loader always throws. A route with a component answers with the error page. */
export default function NotFound() {
  return null;
}
