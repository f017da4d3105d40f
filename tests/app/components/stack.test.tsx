// @vitest-environment jsdom
import { quantities, type ScenarioDocument } from "@demilune/solver";
import { cleanup, fireEvent, render, screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { useState } from "react";
import { afterEach, describe, expect, it, vi } from "vitest";
import { FluxField } from "~/components/fields/FluxField";
import { QuantityLine } from "~/components/fields/QuantityLine";
import type { FieldValue } from "~/components/fields/useTypedQuantity";
import { CrossSection } from "~/components/stack/CrossSection";
import { LayerNumbers } from "~/components/stack/LayerNumbers";
import type { Picked } from "~/components/stack/stackProps";
import { newLayer, newScenario } from "~/lib/stackEdits";

afterEach(cleanup);

function Line({ start, said }: { start: FieldValue; said: (value: FieldValue, live: boolean) => void }) {
  const [value, setValue] = useState(start);
  return (
    <QuantityLine
      quantity={quantities.thicknessNm}
      label="thickness *t*"
      value={value}
      onChange={(next, step) => {
        said(next, step.live);
        setValue(next);
      }}
    />
  );
}

describe("a number on a line", () => {
  it("commits what was typed with its unit on Enter, once", async () => {
    const said = vi.fn();
    render(<Line start={100} said={said} />);
    const input = screen.getByRole("spinbutton", { name: /thickness/ });
    await userEvent.clear(input);
    await userEvent.type(input, "0,5 µm");
    expect(screen.getByRole("status").textContent).toBe("= 500\u2009nm");
    await userEvent.keyboard("{Enter}");
    await userEvent.tab();
    expect(said.mock.calls).toEqual([[500, false]]);
    expect(input).toHaveProperty("value", "500");
  });

  it("keeps what cannot be read, says why, and Escape restores", async () => {
    const said = vi.fn();
    render(<Line start={100} said={said} />);
    const input = screen.getByRole("spinbutton");
    await userEvent.clear(input);
    await userEvent.type(input, "1.234,5");
    await userEvent.tab();
    expect(screen.getByRole("alert").textContent).toContain("more than one decimal mark");
    expect(input).toHaveProperty("value", "1.234,5");
    expect(input.getAttribute("aria-invalid")).toBe("true");
    await userEvent.type(input, "{Escape}");
    expect(input).toHaveProperty("value", "100");
    expect(screen.queryByRole("alert")).toBeNull();
    expect(said).not.toHaveBeenCalled();
  });

  it("steps by 10^0.1 and with Shift by 10^0.01, and by its buttons", async () => {
    const said = vi.fn();
    render(<Line start={100} said={said} />);
    const input = screen.getByRole("spinbutton");
    input.focus();
    await userEvent.keyboard("{ArrowUp}");
    expect(said.mock.lastCall?.[0]).toBeCloseTo(100 * 10 ** 0.1, 1);
    await userEvent.keyboard("{ArrowDown}{Shift>}{ArrowUp}{/Shift}");
    expect(said.mock.lastCall?.[0]).toBeCloseTo(100 * 10 ** 0.01, 1);
    await userEvent.click(screen.getByRole("button", { name: /Lower thickness/ }));
    expect(said.mock.lastCall?.[0]).toBeLessThan(100);
  });

  it("follows a sideways drag on its name and ends it with one settled value", () => {
    const said = vi.fn();
    render(<Line start={100} said={said} />);
    const name = screen.getByText(/thickness/);
    fireEvent.pointerDown(name, { pointerId: 1, clientX: 0, button: 0 });
    fireEvent.pointerMove(name, { pointerId: 1, clientX: 60 });
    fireEvent.pointerMove(name, { pointerId: 1, clientX: 120 });
    fireEvent.pointerUp(name, { pointerId: 1, clientX: 120 });
    expect(said.mock.calls.at(-1)).toEqual([1000, false]);
    expect(said.mock.calls.filter(([, live]) => live)).toHaveLength(2);
  });
});

describe("the flux", () => {
  it("is typed as power with its wavelength, shown as it was typed, and handed over as photons", async () => {
    const said = vi.fn();
    render(<FluxField fluxPerCm2S={1e17} onChange={said} />);
    const input = screen.getByRole("spinbutton", { name: /photon flux/ });
    await userEvent.clear(input);
    await userEvent.type(input, "1 mW/cm2 @ 635 nm{Enter}");
    const [flux, step, wavelength] = said.mock.calls[0];
    // 0.512162040022 mA/cm² over q
    expect(flux / (0.512162040022e-3 / 1.602176634e-19)).toBeCloseTo(1, 11);
    expect(step).toEqual({ live: false });
    expect(wavelength).toBe(635);
  });

  it("converts and never reads anew when the unit is changed", async () => {
    const said = vi.fn();
    render(<FluxField fluxPerCm2S={1e17} wavelengthNm={635} onChange={said} />);
    await userEvent.selectOptions(screen.getByRole("combobox"), "current");
    expect(screen.getByRole("spinbutton")).toHaveProperty("value", "16.0218");
    await userEvent.tab();
    expect(said).not.toHaveBeenCalled();
  });
});

function Bench({ layers }: { layers: string[] }) {
  const [document, setDocument] = useState<ScenarioDocument>({
    ...newScenario("test"),
    stack: {
      layers: layers.map(newLayer),
      interfaces: [{ afterLayer: 0, electronVelocityCmPerS: 200, holeVelocityCmPerS: 200 }],
    },
  });
  const [picked, setPicked] = useState<Picked | null>({ kind: "layer", index: 0 });
  return (
    <>
      <CrossSection document={document} onChange={setDocument} picked={picked} onPick={setPicked} />
      {picked?.kind === "layer" && <LayerNumbers document={document} index={picked.index} onChange={setDocument} />}
      <output>{document.stack.layers.map((layer) => layer.name).join(",")}</output>
    </>
  );
}
const order = () => document.querySelector("output")?.textContent;

describe("the cross-section", () => {
  it("picks, moves, duplicates and deletes by keyboard and keeps the focus on the picked layer", async () => {
    render(<Bench layers={["A", "B", "C"]} />);
    screen.getByRole("button", { name: /Layer 1 of 3: A/ }).focus();
    await userEvent.keyboard("{Alt>}{ArrowDown}{/Alt}");
    expect(order()).toBe("B,A,C");
    expect(document.activeElement?.getAttribute("aria-label")).toContain("Layer 2 of 3: A");
    await userEvent.keyboard("{ArrowDown}");
    expect(document.activeElement?.getAttribute("aria-label")).toContain("Interface between A and C");
    await userEvent.keyboard("{ArrowDown}{Delete}");
    expect(order()).toBe("B,A");
    await userEvent.click(screen.getByRole("button", { name: "Duplicate" }));
    expect(order()).toBe("B,A,A");
    await userEvent.click(screen.getByRole("button", { name: "Add" }));
    expect(order()).toBe("B,A,A,new layer");
    await userEvent.click(screen.getByRole("button", { name: "Up" }));
    expect(order()).toBe("B,A,new layer,A");
  });

  it("has one tab stop, writes velocities at their interface, and refuses to delete the last layer", async () => {
    render(<Bench layers={["A", "B"]} />);
    const inside = screen.getByRole("group", { name: /Layer stack/ });
    expect(inside.querySelectorAll("[tabindex='0']")).toHaveLength(1);
    expect(screen.getByRole("button", { name: /Interface between A and B/ }).textContent).toBe("S = 200 cm/s");
    await userEvent.click(screen.getByRole("button", { name: "Delete" }));
    await userEvent.click(screen.getByRole("button", { name: "Delete" }));
    expect(order()).toBe("B");
    expect(screen.getByText("A stack needs at least one layer.")).toBeDefined();
  });

  it("shows six layers and more with a leader column", () => {
    render(<Bench layers={["A", "B", "C", "D", "E", "F", "G"]} />);
    expect(screen.getAllByRole("button", { name: /^Layer \d of 7/ })).toHaveLength(7);
    expect(screen.getByRole("button", { name: /Interface between A and B/ })).toBeDefined();
  });

  it("edits the numbers of the picked layer", async () => {
    render(<Bench layers={["A", "B"]} />);
    const input = screen.getByRole("spinbutton", { name: /^thickness t, .*A/ });
    await userEvent.clear(input);
    await userEvent.type(input, "50 nm{Enter}");
    expect(screen.getByRole("button", { name: /Layer 1 of 2: A, 50/ })).toBeDefined();
  });
});
