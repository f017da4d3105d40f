import { useState } from "react";

/** The one time that a link is shown: only its hash is kept. */
export function NewShareLink({ link }: { link: string }) {
  const [copied, setCopied] = useState(false);
  return (
    <div role="status" className="mt-4 max-w-2xl border-good border-l-2 pl-3">
      <p>
        <span className="font-semibold text-good">✓ The link is made.</span> Copy it now: it is not shown again.
      </p>
      <div className="mt-1 flex gap-3">
        <input
          readOnly
          value={link}
          aria-label="Share link"
          className="field font-mono text-small"
          onFocus={(event) => event.currentTarget.select()}
        />
        <button
          type="button"
          className="button-quiet"
          onClick={() =>
            navigator.clipboard.writeText(link).then(
              () => setCopied(true),
              () => setCopied(false),
            )
          }
        >
          {copied ? "Copied" : "Copy"}
        </button>
      </div>
    </div>
  );
}
