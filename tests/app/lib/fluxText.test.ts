import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { type FluxForm, fluxForms, fluxFrom, fluxTo, readFlux } from "~/lib/fluxText";

describe("flux typed three ways", () => {
  it("1 mW/cm² at 635 nm can drive 0.512162040022 mA/cm² (q E λ / h c with the exact constants of the SI)", () => {
    const flux = fluxFrom(1, "power", 635);
    expect(fluxTo(flux, "current", 635)).toBeCloseTo(0.512162040022, 11);
  });

  it("takes the form from the unit typed, else the form chosen", () => {
    const byUnit = readFlux("1 mW/cm2 @ 635 nm", "photons", null);
    const byForm = readFlux("1", "power", 635);
    const current = readFlux("0.512162040022 mA/cm²", "photons", null);
    if (!byUnit.ok || !byForm.ok || !current.ok) throw new Error("refused");
    expect(byUnit.value).toBe(byForm.value);
    expect(byUnit.wavelengthNm).toBe(635);
    expect(byUnit.form).toBe("power");
    expect(current.value! / byForm.value!).toBeCloseTo(1, 11);
    expect(readFlux("1e17", "photons", null)).toMatchObject({ ok: true, value: 1e17, note: null });
    const irradiance = readFlux("10 W/m²", "photons", 635);
    expect(irradiance.ok && irradiance.value! / byForm.value!).toBeCloseTo(1, 12);
  });

  it("asks for the wavelength a power needs, and refuses other units and ranges", () => {
    expect(readFlux("1 mW/cm2", "photons", null)).toMatchObject({
      ok: false,
      error: expect.stringContaining("needs a wavelength"),
    });
    expect(readFlux("1 V", "photons", 635)).toMatchObject({
      ok: false,
      error: expect.stringContaining("does not fit here"),
    });
    expect(readFlux("1e22", "photons", null)).toMatchObject({
      ok: false,
      error: expect.stringContaining("permitted: 0 to 10²⁰"),
    });
    expect(readFlux("", "photons", null)).toMatchObject({ ok: false });
  });

  it("there and back is the identity in every form", () => {
    const decades = fc.double({ min: -3, max: 19, noNaN: true });
    fc.assert(
      fc.property(
        decades,
        fc.constantFrom<FluxForm>(...fluxForms),
        fc.integer({ min: 200, max: 2000 }),
        (decade, form, wavelength) => {
          const flux = 10 ** decade;
          expect(fluxFrom(fluxTo(flux, form, wavelength), form, wavelength) / flux).toBeCloseTo(1, 12);
        },
      ),
    );
  });
});
