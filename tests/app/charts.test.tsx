// @vitest-environment jsdom
import { cleanup, render, screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import fc from "fast-check";
import { afterEach, describe, expect, it } from "vitest";
import { ComplexPlane } from "~/components/charts/ComplexPlane";
import { csvOf } from "~/components/charts/columns";
import { OverFrequency } from "~/components/charts/OverFrequency";
import { residualsOf } from "~/components/charts/residuals";
import { phaseDegrees, type SpectrumSeries } from "~/components/charts/spectrum";
import { ticksOf } from "~/components/charts/ticks";
import { useLinkedCursor } from "~/components/charts/useLinkedCursor";
import { complexView, withEqualScales } from "~/components/charts/view";

afterEach(cleanup);

/** One relaxation, Z = 1/(1 + iωτ): a semicircle of diameter 1 with its top at ω = 1/τ. */
function semicircle(id: string, kind: SpectrumSeries["kind"] = "prediction") {
  const frequencyHz = Array.from({ length: 41 }, (_, index) => 10 ** (-2 + index / 10));
  const turns = frequencyHz.map((frequency) => 2 * Math.PI * frequency);
  return {
    id,
    kind,
    label: id,
    frequencyHz,
    re: turns.map((turn) => 1 / (1 + turn * turn)),
    im: turns.map((turn) => -turn / (1 + turn * turn)),
  };
}

function Plots({ spectra }: { spectra: readonly SpectrumSeries[] }) {
  const linked = useLinkedCursor();
  return (
    <>
      <ComplexPlane title="plane" spectra={spectra} symbol="*Z*" unit="Ω·cm²" imUp={false} height={400} {...linked} />
      <OverFrequency title="phase" spectra={spectra} part="phase" symbol="*Z*" unit="Ω·cm²" height={200} {...linked} />
    </>
  );
}

const reading = (name: string) => screen.getByRole("slider", { name }).getAttribute("aria-valuetext");

describe("a plot read by keyboard", () => {
  it("is one tab stop whose arrow, page and end keys walk the points of a curve, in all linked plots", async () => {
    render(<Plots spectra={[semicircle("a")]} />);
    const plane = screen.getByRole("slider", { name: "plane" });
    plane.focus();
    await userEvent.keyboard("{Home}");
    expect(reading("plane")).toContain("f 0.01000\u2009Hz");
    await userEvent.keyboard("{ArrowRight}");
    expect(reading("plane")).toContain("f 0.01259\u2009Hz");
    await userEvent.keyboard("{PageUp}{ArrowLeft}");
    expect(reading("plane")).toContain("f 0.1000\u2009Hz");
    expect(reading("phase")).toContain("f 0.1000\u2009Hz");
    await userEvent.keyboard("{End}{ArrowRight}");
    expect(reading("plane")).toContain("f 100.0\u2009Hz");
    await userEvent.keyboard("{Escape}");
    expect(reading("plane")).toBe("no point read");
  });

  it("gives Im with its sign although −Im points upwards", async () => {
    render(<Plots spectra={[semicircle("a")]} />);
    screen.getByRole("slider", { name: "plane" }).focus();
    await userEvent.keyboard("{Home}");
    expect(reading("plane")).toMatch(/Im Z −0\.0625/);
  });

  it("changes the curve with up and down and stays at the frequency", async () => {
    render(<Plots spectra={[semicircle("a"), semicircle("b", "measured")]} />);
    screen.getByRole("slider", { name: "plane" }).focus();
    await userEvent.keyboard("{Home}{ArrowRight}");
    expect(reading("plane")).toMatch(/^b: f 0\.01259/);
    await userEvent.keyboard("{ArrowUp}");
    expect(reading("plane")).toMatch(/^a: f 0\.01259/);
  });

  it("shows the same numbers as a table", async () => {
    render(<Plots spectra={[semicircle("a")]} />);
    await userEvent.click(screen.getAllByRole("button", { name: "Table" })[0]);
    expect(screen.getByRole("columnheader", { name: /Im Z/ })).toBeTruthy();
    expect(screen.getAllByRole("row")).toHaveLength(42);
  });
});

describe("equal scales", () => {
  const frames = fc.record({ width: fc.integer({ min: 80, max: 2000 }), height: fc.integer({ min: 60, max: 1200 }) });
  const range = fc.tuple(
    fc.double({ min: -1e3, max: 1e3, noNaN: true }),
    fc.double({ min: 1e-3, max: 1e3, noNaN: true }),
  );
  const views = fc.record({ x: range, y: range }).map(({ x, y }) => ({
    x: [x[0], x[0] + x[1]] as [number, number],
    y: [y[0], y[0] + y[1]] as [number, number],
  }));
  const unitRatio = (view: { x: [number, number]; y: [number, number] }, frame: { width: number; height: number }) =>
    frame.width / (view.x[1] - view.x[0]) / (frame.height / (view.y[1] - view.y[0]));

  it("hold for every frame and every box that is zoomed to, which stays visible", () => {
    fc.assert(
      fc.property(views, frames, (view, frame) => {
        const equal = withEqualScales(view, frame);
        expect(unitRatio(equal, frame)).toBeCloseTo(1, 6);
        const slack = 1e-6 * (equal.x[1] - equal.x[0]);
        expect(equal.x[0] <= view.x[0] + slack && equal.x[1] >= view.x[1] - slack).toBe(true);
        expect(equal.y[0] <= view.y[0] + slack && equal.y[1] >= view.y[1] - slack).toBe(true);
      }),
    );
  });

  it("hold for the whole view, which contains all points", () => {
    fc.assert(
      fc.property(views, frames, fc.integer({ min: 0, max: 120 }), (bounds, frame, legend) => {
        const whole = complexView(bounds, frame, legend);
        expect(unitRatio(whole, frame)).toBeCloseTo(1, 6);
        const slack = 1e-6 * (whole.x[1] - whole.x[0]);
        expect(whole.x[0] <= bounds.x[0] + slack && whole.x[1] >= bounds.x[1] - slack).toBe(true);
        expect(whole.y[0] <= bounds.y[0] + slack && whole.y[1] >= bounds.y[1] - slack).toBe(true);
      }),
    );
  });
});

describe("ticks", () => {
  it("lie inside the axis at round numbers", () => {
    expect(ticksOf([-0.1, 3.2], "linear", 584, 64).values).toEqual([0, 0.5, 1, 1.5, 2, 2.5, 3]);
    expect(ticksOf([-140, 10], "linear", 160, 38, 45)).toMatchObject({ labels: ["−135", "−90", "−45", "0"] });
  });

  it("name decades on a logarithmic axis, with the steps between when there is only one", () => {
    const wide = ticksOf([1e-2, 1e7], "log", 300, 40);
    expect(wide.labels.filter(Boolean)).toEqual(["10⁻²", "10⁰", "10²", "10⁴", "10⁶"]);
    expect(ticksOf([0.4, 3], "log", 160, 38).labels.filter(Boolean)).toEqual(["5×10⁻¹", "10⁰", "2×10⁰"]);
  });
});

describe("curves over frequency", () => {
  it("have a continuous phase where the argument passes half a turn", () => {
    const angles = [170, 178, 186, 194].map((angle) => (angle * Math.PI) / 180);
    const phase = phaseDegrees(angles.map(Math.cos), angles.map(Math.sin));
    expect([...phase].map(Math.round)).toEqual([170, 178, 186, 194]);
  });

  it("leave residuals in % of the modulus, masked points out, 0 against themselves", () => {
    const prediction = semicircle("prediction");
    const same = { ...semicircle("measured", "measured"), masked: prediction.re.map((_, index) => index === 3) };
    const [re, im] = residualsOf(prediction, same);
    expect(re.x).toHaveLength(40);
    expect(Math.max(...Array.from(re.y, Math.abs), ...Array.from(im.y, Math.abs))).toBeLessThan(1e-9);
    const larger = {
      ...same,
      masked: undefined,
      re: same.re.map((value) => value / 1.1),
      im: same.im.map((value) => value / 1.1),
    };
    const [real, imaginary] = residualsOf(prediction, larger);
    const size = Array.from(real.y, (value, index) => Math.hypot(value, imaginary.y[index]));
    for (const value of size) expect(value).toBeCloseTo(10, 6);
  });
});

describe("the CSV file of a plot", () => {
  it("has units in its head, full precision, and no formulas in its text cells", () => {
    const series = { id: "a", label: "=SUM(A1)", kind: "prediction" as const, x: [0.1 + 0.2], y: [1e-7] };
    const columns = [
      { label: "*f*", unit: "Hz", value: () => series.x[0] },
      { label: "Re *Z*", unit: "Ω·cm²", value: () => series.y[0] },
    ];
    expect(csvOf("title", [series], columns)).toBe(
      "# title\nseries,f / Hz,Re Z / Ω\u2009cm²,masked\n'=SUM(A1),0.30000000000000004,1e-7,0\n",
    );
  });
});
