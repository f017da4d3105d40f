/**
 * The photon flux as photons, as a power density with a wavelength, or as the current it could at most drive.
 *
 * | name | meaning | unit |
 * |---|---|---|
 * | flux | photons | cm⁻² s⁻¹ |
 * | power | E = Φ h c / λ | mW/cm² |
 * | current | J = q Φ | mA/cm² |
 */
import { elementaryCharge, planckConstant, type Quantity, quantities, speedOfLight } from "@demilune/solver";
import { formatNumber } from "./numberFormat";
import { permittedRange, type Reading, readQuantity, splitTyped, unitOf, valueIn } from "./quantityText";
import { sameDimension } from "./units";

export const fluxForms = ["photons", "power", "current"] as const;
export type FluxForm = (typeof fluxForms)[number];

export const fluxUnits: Record<FluxForm, string> = { photons: "cm⁻² s⁻¹", power: "mW/cm²", current: "mA/cm²" };

const flux: Quantity = quantities.fluxPerCm2S;
const wavelength: Quantity = quantities.wavelengthNm;

/** mW/cm² carried by one photon cm⁻² s⁻¹ at a wavelength in nm. */
const milliwattPerPhoton = (wavelengthNm: number): number =>
  (planckConstant * speedOfLight * 1e3) / (wavelengthNm * 1e-9);

/** Flux in photons cm⁻² s⁻¹ of a value in one of the three forms. */
export function fluxFrom(value: number, form: FluxForm, wavelengthNm: number): number {
  if (form === "photons") return value;
  return form === "power" ? value / milliwattPerPhoton(wavelengthNm) : value / (elementaryCharge * 1e3);
}

/** A flux in photons cm⁻² s⁻¹ shown in one of the three forms. */
export function fluxTo(fluxPerCm2S: number, form: FluxForm, wavelengthNm: number): number {
  if (form === "photons") return fluxPerCm2S;
  return form === "power" ? fluxPerCm2S * milliwattPerPhoton(wavelengthNm) : fluxPerCm2S * elementaryCharge * 1e3;
}

/**
 * Read a flux. A typed unit decides the form, else the form chosen; "1 mW/cm2 @ 635 nm" brings its own wavelength.
 * @returns the flux in photons cm⁻² s⁻¹ with the reading in words, and the wavelength where one was typed
 */
export function readFlux(
  text: string,
  form: FluxForm,
  wavelengthNm: number | null,
): Reading & { wavelengthNm?: number; form?: FluxForm } {
  const [amount, typedWavelength] = text.split(/\s*(?:@|\bat\b)\s*/);
  if (text.trim() === "") return { ok: false, error: `a value is needed; permitted: ${permittedRange(flux)}` };
  const typed = splitTyped(amount);
  if ("error" in typed)
    return { ok: false, error: `${typed.error}; this field takes ${Object.values(fluxUnits).join(", ")}` };
  const found = typed.unit && fluxForms.find((candidate) => sameDimension(typed.unit!, unitOf(fluxUnits[candidate])));
  if (typed.unit && !found) {
    return {
      ok: false,
      error: `“${typed.unitText}” does not fit here; this field takes ${Object.values(fluxUnits).join(", ")}`,
    };
  }
  const used = found ?? form;
  const own = typedWavelength === undefined ? null : readQuantity(typedWavelength, wavelength);
  if (own && !own.ok) return { ok: false, error: `wavelength: ${own.error}` };
  const nm = (own ? own.value : wavelengthNm) ?? null;
  if (used === "power" && nm === null) {
    return {
      ok: false,
      error: "mW/cm² needs a wavelength: fill it in, or write it behind the value, such as 1 mW/cm² @ 635 nm",
    };
  }
  const value = fluxFrom(valueIn(typed, fluxUnits[used]), used, nm ?? 1);
  if (!(value >= flux.min && value <= flux.max)) {
    return {
      ok: false,
      error: `this is ${formatNumber(value, 4)} photons cm⁻² s⁻¹; permitted: ${permittedRange(flux)}`,
    };
  }
  const shown = used === "photons" ? null : `= ${formatNumber(value, 6)} photons cm⁻² s⁻¹`;
  const ambiguous = typed.decimal.ambiguous ? `read as ${typed.decimal.mantissa}` : null;
  return {
    ok: true,
    value,
    note: [ambiguous, shown].filter(Boolean).join(", ") || null,
    ...(nm !== null && own ? { wavelengthNm: nm } : {}),
    ...(found ? { form: found } : {}),
  };
}
