import { type TextRun, textRuns } from "~/lib/richText";

function Run({ run }: { run: TextRun }) {
  switch (run.style) {
    case "italic":
      return <i>{run.text}</i>;
    case "superscript":
      return <sup>{run.text}</sup>;
    case "subscript":
      return <sub>{run.text}</sub>;
    default:
      return run.text;
  }
}

/** Text with symbols, units and powers of ten set as the trade sets them; notation of `richText.ts`. */
export function RichText({ text }: { text: string }) {
  return textRuns(text).map((run) => <Run key={run.start} run={run} />);
}
