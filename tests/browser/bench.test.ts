/** The bench in a real browser: live curves, keyboard, files, accessibility. */
import { readFileSync } from "node:fs";
import type { Page } from "playwright-core";
import { describe, expect, it } from "vitest";
import { desktop, expectAccessible, hydrated, phone, visit, withBrowser } from "./visit";

withBrowser();

/** Opens a scenario of the demo lab by its name and waits for the solver. */
async function openBench(page: Page, labPath: string, name: string) {
  await page.goto(`${labPath}/scenarios`);
  await hydrated(page);
  await page.getByRole("link", { name, exact: true }).first().click();
  await page.getByRole("heading", { name }).waitFor();
  await solved(page);
}

const solved = (page: Page) =>
  page.waitForFunction(
    () => document.querySelector(".bench[data-milliseconds]")?.getAttribute("data-busy") === "false",
  );

const plane = (page: Page) => page.getByRole("slider", { name: /complex plane/ }).first();
const curve = (page: Page) =>
  plane(page).evaluate((plot) =>
    plot.querySelector("path[stroke='var(--series-1)'][fill='none']:not([d='M0,0h26'])")?.getAttribute("d"),
  );

const dyeFilm = "Mesoporous dye film";

describe("the bench", () => {
  it("moves the curve while a value is dragged, and takes it back with undo", async () => {
    const { page, labPath } = await visit({ role: "researcher" });
    await openBench(page, labPath, dyeFilm);
    const before = await curve(page);
    const field = page.getByRole("spinbutton", { name: /electron lifetime/ }).first();
    const value = await field.getAttribute("aria-valuenow");
    const place = (await field.boundingBox())!;
    await page.mouse.move(place.x + 20, place.y + 12);
    await page.mouse.down();
    await page.mouse.move(place.x + 80, place.y + 12, { steps: 6 });
    await page.mouse.up();
    expect(Number(await field.getAttribute("aria-valuenow"))).toBeGreaterThan(Number(value));
    await solved(page);
    await expect.poll(() => curve(page)).not.toBe(before);
    await page.getByRole("button", { name: "Undo" }).first().click();
    await solved(page);
    await expect.poll(() => field.getAttribute("aria-valuenow")).toBe(value);
  });

  it("steps a value by arrow key by a factor 10^0.1", async () => {
    const { page, labPath } = await visit({ role: "researcher" });
    await openBench(page, labPath, dyeFilm);
    const field = page.getByRole("spinbutton", { name: /absorption coefficient, dyed/ }).first();
    const before = Number(await field.getAttribute("aria-valuenow"));
    await field.focus();
    await page.keyboard.press("ArrowUp");
    const after = Number(await field.getAttribute("aria-valuenow"));
    expect(after / before).toBeCloseTo(10 ** 0.1, 2);
  });

  it("is read by keyboard, in all plots and in the one readout", async () => {
    const { page, labPath } = await visit({ role: "viewer" });
    await openBench(page, labPath, dyeFilm);
    await plane(page).focus();
    await page.keyboard.press("Home");
    await page.keyboard.press("ArrowRight");
    const spoken = await plane(page).getAttribute("aria-valuetext");
    expect(spoken).toMatch(/f .*Hz, Re Q .*, Im Q /);
    const phase = page.getByRole("slider", { name: /phase/ }).first();
    expect((await phase.getAttribute("aria-valuetext"))?.split(",")[0]).toBe(
      spoken?.split(",")[0].replace("prediction", "prediction"),
    );
    expect(await page.locator("[data-readout]").first().textContent()).toMatch(/cursor/);
  });

  it("turns Im over and keeps that in the address", async () => {
    const { page, labPath } = await visit({ role: "viewer" });
    await openBench(page, labPath, dyeFilm);
    await page.getByRole("button", { name: "Im up", exact: true }).click();
    await page.waitForURL(/im=up/);
    await page.getByRole("button", { name: "−Im up" }).waitFor();
  });

  it("gives the prediction as CSV, of one plot and of the scenario", async () => {
    const { page, labPath } = await visit({ role: "viewer" });
    await openBench(page, labPath, dyeFilm);
    const [plot] = await Promise.all([
      page.waitForEvent("download"),
      page.getByRole("button", { name: "CSV" }).first().click(),
    ]);
    const lines = readFileSync((await plot.path())!, "utf8")
      .trim()
      .split("\n");
    expect(lines[1]).toBe("series,f / Hz,Re Q,Im Q,masked");
    const [whole] = await Promise.all([page.waitForEvent("download"), page.getByRole("link", { name: "CSV" }).click()]);
    expect(whole.suggestedFilename()).toMatch(/\.csv$/);
    expect(readFileSync((await whole.path())!, "utf8")).toContain("\nspectrum,technique,frequencyHz,re,im\n0,imps,");
  });

  it("gives a figure as SVG in the light theme with its styles written in", async () => {
    const { page, labPath } = await visit({ role: "viewer", colorScheme: "dark" });
    await openBench(page, labPath, dyeFilm);
    const [file] = await Promise.all([
      page.waitForEvent("download"),
      page.getByRole("button", { name: "SVG" }).first().click(),
    ]);
    const svg = readFileSync((await file.path())!, "utf8");
    expect(svg).toContain("rgb(0, 114, 178)");
    expect(svg).not.toMatch(/var\(--|class=/);
  });

  it("computes and keeps a run once", async () => {
    const { page, labPath } = await visit({ role: "researcher" });
    await openBench(page, labPath, dyeFilm);
    await page.getByRole("button", { name: "Compute and keep" }).click();
    await page.getByText(/The run is kept; it took|This run is kept already/).waitFor();
    await page.getByRole("button", { name: "Compute and keep" }).click();
    await page.getByText("This run is kept already.").waitFor();
  });

  it("shows curves before scripts load", async () => {
    const { page, labPath } = await visit({ role: "viewer", scripts: false });
    await page.goto(`${labPath}/scenarios`);
    await page.getByRole("link", { name: dyeFilm, exact: true }).first().click();
    await page.locator(".plot-surface svg").first().waitFor();
    expect(await page.locator(".plot-surface path[stroke='var(--series-1)']").count()).toBeGreaterThan(2);
  });

  it.each([
    { name: "desktop, light", viewport: desktop, colorScheme: "light" },
    { name: "phone, dark", viewport: phone, colorScheme: "dark" },
  ] as const)("has no accessibility finding and no sideways scroll on $name", async ({ viewport, colorScheme }) => {
    const { page, labPath } = await visit({ role: "researcher", viewport, colorScheme });
    await openBench(page, labPath, dyeFilm);
    await expectAccessible(page);
    expect(await page.evaluate(() => document.documentElement.scrollWidth <= innerWidth)).toBe(true);
    await page.getByRole("button", { name: "Table" }).first().click();
    await expectAccessible(page);
  });

  it("moves a curve with a slider on a phone", async () => {
    const { page, labPath } = await visit({ role: "viewer", viewport: phone });
    await openBench(page, labPath, dyeFilm);
    const before = await curve(page);
    const slider = page.locator("input.slider").first();
    await slider.focus();
    for (let press = 0; press < 20; press++) await page.keyboard.press("ArrowRight");
    await solved(page);
    await expect.poll(() => curve(page)).not.toBe(before);
  });
});
