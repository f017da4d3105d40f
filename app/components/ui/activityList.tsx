import { Moment } from "./moment";

interface Happening {
  id: string;
  kind: string;
  objectKind: string;
  text: string;
  at: Date;
  userName: string | null;
}

export function ActivityList({ happenings }: { happenings: Happening[] }) {
  if (happenings.length === 0) return <p className="mt-2 text-ink-soft">Nothing has happened yet.</p>;
  return (
    <ol className="mt-2">
      {happenings.map(({ id, kind, objectKind, text, at, userName }) => (
        <li key={id} className="flex flex-wrap gap-x-3 border-line border-t py-1.5">
          <Moment at={at} />
          <span>
            {userName ?? "Demilune"} {kind} {objectKind} <span className="font-semibold">{text}</span>
          </span>
        </li>
      ))}
    </ol>
  );
}
