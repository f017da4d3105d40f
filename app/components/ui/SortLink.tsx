import { Link, useSearchParams } from "react-router";

interface SortLinkProps {
  /** Value of `sort` in the address. */
  name: string;
  label: string;
  present: { sort: string; descending: boolean };
  /** The order a first click gives. */
  first?: "up" | "down";
}

/** Head of a column that sorts a list; the order is in the address and written as a mark. */
export function SortLink({ name, label, present, first = "up" }: SortLinkProps) {
  const [search] = useSearchParams();
  const active = present.sort === name;
  const next = new URLSearchParams(search);
  next.set("sort", name);
  next.set("order", active ? (present.descending ? "up" : "down") : first);
  next.delete("page");
  return (
    <Link
      to={`?${next}`}
      className={`inline-block min-h-6 py-0.5 hover:text-ink ${active ? "font-semibold text-ink" : ""}`}
    >
      {label}
      <span aria-hidden="true">{active ? (present.descending ? " ▼" : " ▲") : ""}</span>
    </Link>
  );
}

/** `aria-sort` of a column's head. */
export const ariaSort = (name: string, present: SortLinkProps["present"]) =>
  present.sort !== name ? undefined : present.descending ? "descending" : "ascending";
