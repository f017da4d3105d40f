import type { ReactNode } from "react";
import { Link, useSearchParams } from "react-router";

interface SortHeaderProps {
  /** Value of `sort` in the address. */
  column: string;
  sort: string;
  descending: boolean;
  /** Direction the column begins with. */
  beginsDescending?: boolean;
  className?: string;
  children: ReactNode;
}

/** A column head that sorts the list by its column, then turns the order over; the choice is in the address. */
export function SortHeader({
  column,
  sort,
  descending,
  beginsDescending = false,
  className,
  children,
}: SortHeaderProps) {
  const [search] = useSearchParams();
  const active = sort === column;
  const next = new URLSearchParams(search);
  next.set("sort", column);
  next.set("order", (active ? !descending : beginsDescending) ? "down" : "up");
  next.delete("page");
  return (
    <th scope="col" aria-sort={active ? (descending ? "descending" : "ascending") : undefined} className={className}>
      <Link
        to={`?${next}`}
        preventScrollReset
        className={`min-h-6 hover:text-ink ${active ? "font-semibold text-ink" : "text-ink-soft"}`}
      >
        {children}
        <span aria-hidden="true" className="ml-1">
          {active ? (descending ? "↓" : "↑") : "↕"}
        </span>
      </Link>
    </th>
  );
}
