import type { SVGProps } from "react";
import { textRuns } from "~/lib/richText";

const raise = { plain: 0, italic: 0, superscript: -0.38, subscript: 0.22 } as const;

interface SvgTextProps extends Omit<SVGProps<SVGTextElement>, "children"> {
  /** Notation of `richText.ts`. */
  text: string;
  size?: number;
}

/** One line of SVG text with italics, superscripts and subscripts; shifts undo themselves on the next run. */
export function SvgText({ text, size = 13, ...rest }: SvgTextProps) {
  let level = 0;
  return (
    <text fontSize={size} {...rest}>
      {textRuns(text).map((run) => {
        const dy = (raise[run.style] - level) * size;
        level = raise[run.style];
        return (
          <tspan
            key={run.start}
            dy={dy || undefined}
            fontStyle={run.style === "italic" ? "italic" : undefined}
            fontSize={run.style === "superscript" || run.style === "subscript" ? size * 0.77 : undefined}
          >
            {run.text}
          </tspan>
        );
      })}
    </text>
  );
}
