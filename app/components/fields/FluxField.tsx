import { quantities } from "@demilune/solver";
import { type KeyboardEvent, useId, useState } from "react";
import { RichText } from "~/components/ui/RichText";
import { type FluxForm, fluxForms, fluxTo, fluxUnits, readFlux } from "~/lib/fluxText";
import { formatNumber } from "~/lib/numberFormat";
import { stepped, typedForm } from "~/lib/quantityText";
import { ariaNumbers } from "./ariaNumbers";
import { useSidewaysDrag } from "./useSidewaysDrag";
import type { ChangeStep } from "./useTypedQuantity";

const formWords: Record<FluxForm, string> = {
  photons: "photons per cm² and s",
  power: "mW/cm²",
  current: "mA/cm² it could at most drive",
};

export interface FluxFieldProps {
  /** Photons cm⁻² s⁻¹. */
  fluxPerCm2S: number;
  /** Wavelength of the light, needed for mW/cm². */
  wavelengthNm?: number;
  /** A wavelength is handed over where it was typed behind the value ("1 mW/cm² @ 635 nm"). */
  onChange: (fluxPerCm2S: number, step: ChangeStep, wavelengthNm?: number) => void;
  label?: string;
  readOnly?: boolean;
}

/**
 * The photon flux on a line of the bench's number lists, typed as photons, as mW/cm² with a wavelength, or as the
 * mA/cm² it could at most drive. Changing the unit converts the number and never reads it anew.
 */
export function FluxField(props: FluxFieldProps) {
  const { fluxPerCm2S, wavelengthNm, onChange, label = "flux *Φ*", readOnly } = props;
  const id = useId();
  const [chosen, setForm] = useState<FluxForm>("photons");
  const form = chosen === "power" && wavelengthNm === undefined ? "photons" : chosen;
  const [text, setText] = useState<string | null>(null);
  const [checked, setChecked] = useState(false);
  const shownNumber = Number(fluxTo(fluxPerCm2S, form, wavelengthNm ?? 1).toPrecision(6));
  const reading = text === null ? null : readFlux(text, form, wavelengthNm ?? null);
  const drag = useSidewaysDrag({
    quantity: quantities.fluxPerCm2S,
    value: readOnly ? null : fluxPerCm2S,
    onMove: change,
  });
  const needsWavelength = chosen === "power" && form !== "power";
  const error = checked && reading && !reading.ok ? reading.error : null;
  const message =
    error ??
    (needsWavelength
      ? "mW/cm² needs a wavelength: type it behind the number, as in 1 mW/cm² @ 635 nm, or fill it in below"
      : reading?.ok
        ? reading.note
        : null);

  function change(next: number, live: boolean) {
    setText(null);
    setChecked(false);
    if (next !== fluxPerCm2S || !live) onChange(next, { live });
  }
  function commit() {
    if (text === null) return;
    setChecked(true);
    if (!reading?.ok || typeof reading.value !== "number") return;
    setText(null);
    if (reading.form) setForm(reading.form);
    if (reading.value !== fluxPerCm2S || reading.wavelengthNm !== undefined) {
      onChange(reading.value, { live: false }, reading.wavelengthNm);
    }
  }
  function onKeyDown(event: KeyboardEvent) {
    if (event.altKey || event.ctrlKey || event.metaKey) return;
    if (event.key === "ArrowUp" || event.key === "ArrowDown") {
      event.preventDefault();
      const direction = event.key === "ArrowUp" ? 1 : -1;
      change(stepped(fluxPerCm2S, quantities.fluxPerCm2S, direction, event.shiftKey), false);
    } else if (event.key === "Enter") {
      event.preventDefault();
      commit();
    } else if (event.key === "Escape" && text !== null) {
      event.stopPropagation();
      setText(null);
      setChecked(false);
    }
  }

  return (
    <div>
      <div className="grid h-6 grid-cols-[minmax(0,max-content)_minmax(4.5rem,1fr)_84px] border-b border-line leading-[22px]">
        <label
          htmlFor={id}
          className={`truncate text-lamp select-none touch-pan-y ${readOnly ? "" : "cursor-ew-resize"}`}
          {...drag}
        >
          <RichText text={label} />
        </label>
        <div className="relative">
          <input
            id={id}
            type="text"
            role="spinbutton"
            aria-label={`photon flux, in ${formWords[form]}`}
            {...ariaNumbers(shownNumber)}
            aria-valuetext={`${formatNumber(shownNumber)} ${fluxUnits[form]}`}
            aria-invalid={error !== null}
            aria-describedby={message === null ? undefined : `${id}-message`}
            readOnly={readOnly}
            autoComplete="off"
            autoCapitalize="off"
            spellCheck={false}
            value={text ?? typedForm(shownNumber)}
            onChange={(event) => {
              setText(event.currentTarget.value);
              setChecked(false);
            }}
            onBlur={commit}
            onKeyDown={readOnly ? undefined : onKeyDown}
            onFocus={(event) => event.currentTarget.select()}
            className={`peer absolute right-0 h-6 w-full rounded-[2px] bg-transparent px-1 text-right tabular-nums focus:z-20 focus:w-40 focus:bg-sheet focus:text-ink focus:outline-2 focus:outline-tide ${
              text === null ? "text-transparent" : "text-ink"
            } ${error ? "outline-2 outline-bad" : ""}`}
          />
          {text === null && (
            <span
              aria-hidden="true"
              className="pointer-events-none absolute inset-y-0 right-0 px-1 tabular-nums peer-focus:hidden"
            >
              <RichText text={formatNumber(shownNumber, shownNumber === fluxPerCm2S ? undefined : 4)} />
            </span>
          )}
        </div>
        <select
          aria-label="unit of the photon flux"
          title={formWords[chosen]}
          value={chosen}
          onChange={(event) => setForm(event.currentTarget.value as FluxForm)}
          className="h-6 w-full rounded-[2px] bg-transparent pl-1 text-small text-ink-soft"
        >
          {fluxForms.map((one) => (
            <option key={one} value={one} className="bg-sheet text-ink">
              {fluxUnits[one]}
            </option>
          ))}
        </select>
      </div>
      {message !== null && (
        <p
          id={`${id}-message`}
          role={error ? "alert" : "status"}
          className={`py-0.5 text-small ${error ? "text-bad" : "text-ink-soft"}`}
        >
          {error && <span aria-hidden="true">▲ </span>}
          <RichText text={message} />
        </p>
      )}
    </div>
  );
}
