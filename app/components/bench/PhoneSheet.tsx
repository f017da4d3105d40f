import type { ScenarioDocument } from "@demilune/solver";
import { type ReactNode, useState } from "react";
import type { ChangeDocument } from "~/components/stack/stackProps";
import { RichText } from "~/components/ui/RichText";
import { withField } from "~/lib/documentNumbers";
import { formatQuantity } from "~/lib/numberFormat";
import { plainText } from "~/lib/richText";
import { type SliderNumber, scaleAround, slidersAt } from "./sliders";

interface SliderProps {
  number: SliderNumber;
  onMove: (value: number, live: boolean) => void;
}

const steps = 400;

function Slider({ number, onMove }: SliderProps) {
  const { quantity, value, label, path } = number;
  // The scale belongs to where the slider began, or the thumb would run away under the finger.
  const [scale] = useState(() => scaleAround(value, quantity));
  const printed = formatQuantity(value, quantity.unit);
  return (
    <div className="grid">
      <div className="flex justify-between">
        <span className={path.startsWith("light.") ? "text-lamp" : undefined}>
          <RichText text={label} />
        </span>
        <span className="font-semibold tabular-nums">
          <RichText text={printed} />
        </span>
      </div>
      <input
        type="range"
        className="slider"
        min={0}
        max={steps}
        step={1}
        value={Math.round(scale.positionOf(value) * steps)}
        aria-label={plainText(label)}
        aria-valuetext={printed}
        onChange={(event) => onMove(scale.valueAt(Number(event.currentTarget.value) / steps), true)}
        onPointerUp={() => onMove(value, false)}
        onKeyUp={() => onMove(value, false)}
      />
    </div>
  );
}

interface PhoneSheetProps {
  document: ScenarioDocument;
  onChange: ChangeDocument;
  /** Paths that may stand under the thumb, the first three that hold a number are taken. */
  paths: readonly string[];
  /** Where they are all that may be moved, the sliders stand on wide screens too. */
  everywhere?: boolean;
  /** Buttons under the sliders. */
  children?: ReactNode;
}

/** On a phone: at most three numbers under the thumb, at the lower edge while the page scrolls. */
export function PhoneSheet({ document, onChange, paths, everywhere, children }: PhoneSheetProps) {
  const [open, setOpen] = useState(true);
  return (
    <section
      aria-label="Numbers to move"
      className={`not-printed sticky bottom-0 z-10 -mx-4 border-line border-t bg-sheet px-4 pt-2 pb-3 ${everywhere ? "md:mx-0" : "md:hidden"}`}
    >
      {open &&
        slidersAt(document, paths).map((number) => (
          <Slider
            key={number.path}
            number={number}
            onMove={(value, live) => onChange(withField(document, number.keys, value), { path: number.path, live })}
          />
        ))}
      <div className="flex flex-wrap justify-between gap-x-4">
        {children}
        <button type="button" className="action" aria-expanded={open} onClick={() => setOpen(!open)}>
          {open ? "Hide sliders" : "Show sliders"}
        </button>
      </div>
    </section>
  );
}
