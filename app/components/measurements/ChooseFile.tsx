import { type ChangeEvent, type DragEvent, useState } from "react";
import { Form, href, Link } from "react-router";
import { importLimits } from "~/lib/textImport/settings";

interface ChooseFileProps {
  labId: string;
  /** Called in a browser with scripts: the file is read in the page and sent only when it is stored. */
  onFile: (file: File) => void;
}

/** Where a file is dropped, chosen or pasted; a plain form before scripts load. */
export function ChooseFile({ labId, onFile }: ChooseFileProps) {
  const [over, setOver] = useState(false);
  const [tooLarge, setTooLarge] = useState<string | null>(null);
  const take = (file: File | undefined) => {
    if (!file) return;
    if (file.size > importLimits.bytes) {
      setTooLarge(
        `${file.name} has ${(file.size / 1e6).toFixed(1)} MB; allowed: up to ${importLimits.bytes / 1e6} MB.`,
      );
      return;
    }
    setTooLarge(null);
    onFile(file);
  };
  const onDrop = (event: DragEvent) => {
    event.preventDefault();
    setOver(false);
    take(event.dataTransfer.files[0]);
  };
  return (
    <div className="max-w-3xl">
      <h1 className="font-semibold text-title">Import a measurement</h1>
      <p className="mt-1 text-ink-soft">
        A text file from an instrument, or columns copied from a spreadsheet. You see what was read before anything is
        stored. Up to {importLimits.bytes / 1e6} MB.
      </p>
      <Form
        method="post"
        encType="multipart/form-data"
        action={href("/lab/:labId/measurements/import", { labId })}
        className="mt-4 grid gap-6"
        onSubmit={(event) => {
          const pasted = new FormData(event.currentTarget).get("pasted");
          if (typeof pasted !== "string" || pasted.trim() === "") return;
          event.preventDefault();
          take(new File([pasted], "pasted.txt", { type: "text/plain" }));
        }}
      >
        {/* biome-ignore lint/a11y/noStaticElementInteractions: dropping is a further way beside the labelled input inside */}
        <div
          className={`rounded border border-dashed px-4 py-6 ${over ? "border-tide bg-wash" : "border-rule"}`}
          onDragOver={(event) => {
            event.preventDefault();
            setOver(true);
          }}
          onDragLeave={() => setOver(false)}
          onDrop={onDrop}
        >
          <label htmlFor="file" className="font-semibold">
            File
          </label>
          <p id="file-help" className="text-ink-soft text-small">
            Comma, semicolon, tab or spaces; decimal comma or point; Re and Im, −Im, or modulus and phase; several
            spectra in one file. Drop it here or choose it.
          </p>
          <input
            id="file"
            type="file"
            name="file"
            aria-describedby="file-help"
            className="mt-2 block max-w-full file:mr-3 file:min-h-8 file:cursor-pointer file:rounded file:border file:border-rule file:bg-sheet file:px-3.5 file:font-semibold file:text-tide"
            onChange={(event: ChangeEvent<HTMLInputElement>) => take(event.currentTarget.files?.[0])}
          />
          {tooLarge && (
            <p role="alert" className="mt-2 text-bad">
              {tooLarge}
            </p>
          )}
        </div>
        <div>
          <label htmlFor="pasted" className="font-semibold">
            Or pasted columns
          </label>
          <textarea
            id="pasted"
            name="pasted"
            rows={8}
            spellCheck={false}
            className="field mt-1 font-mono"
            placeholder={"f/Hz\tRe Q\tIm Q\n0,1\t0,81\t-0,0005"}
          />
        </div>
        <div className="flex items-center gap-5">
          <button type="submit" name="intent" value="look" className="button">
            Look at it
          </button>
          <Link to={href("/lab/:labId/measurements", { labId })} className="action py-0.5">
            Cancel
          </Link>
        </div>
      </Form>
    </div>
  );
}
