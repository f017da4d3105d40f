/** A time, in UTC to the minute, the same on the server and in every browser. */
export function Moment({ at }: { at: Date }) {
  const text = at.toISOString();
  return (
    <time dateTime={text} className="text-ink-soft">
      {text.slice(0, 10)} {text.slice(11, 16)} UTC
    </time>
  );
}
