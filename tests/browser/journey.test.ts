/** The main job from end to end without a mouse. */
import type { Locator, Page } from "playwright-core";
import { expect, it } from "vitest";
import { hydrated, visit, withBrowser } from "./visit";

withBrowser();

const settled = (page: Page) =>
  page.waitForFunction(
    () => document.querySelector(".bench[data-milliseconds]")?.getAttribute("data-busy") === "false",
  );

/** "4.36" or "1.61×10⁶" as a number. */
function printedNumber(text: string | null): number {
  const [mantissa, power = ""] = (text ?? "").split("×10");
  const digits = [...power].map((digit) => "⁰¹²³⁴⁵⁶⁷⁸⁹".indexOf(digit)).map((digit) => (digit < 0 ? "-" : digit));
  return Number(mantissa) * 10 ** Number(digits.join("") || 0);
}

async function press(place: Locator, key: string) {
  await place.focus();
  await place.page().keyboard.press(key);
}

it("predicts, holds, saves, lays a measurement over and shares by keyboard alone", async () => {
  const { page } = await visit({ role: "researcher" });
  await hydrated(page);
  await settled(page);
  const slowPeak = page.getByRole("table", { name: "Arcs" }).getByRole("row").nth(1).getByRole("cell").nth(1);
  const before = printedNumber(await slowPeak.textContent());

  const mobility = page.getByRole("spinbutton", { name: /cation mobility/ }).first();
  const start = await mobility.getAttribute("aria-valuenow");
  await press(mobility, "PageUp");
  // The slow arc is the ions': its frequency goes with their mobility (∂ln f/∂ln µ near 1; from memory).
  await expect
    .poll(async () => printedNumber(await slowPeak.textContent()) / before, { timeout: 30_000 })
    .toBeGreaterThan(7);
  expect(printedNumber(await slowPeak.textContent()) / before).toBeLessThan(13);

  await press(page.getByRole("button", { name: "Hold this curve" }).first(), "Enter");
  await page.getByRole("button", { name: "Let the curve go" }).first().waitFor();
  await page.keyboard.press("Control+z");
  await expect.poll(() => mobility.getAttribute("aria-valuenow")).toBe(start);
  await page.getByText("held at").first().waitFor();
  await page.keyboard.press("Control+Shift+z");
  await expect.poll(() => mobility.getAttribute("aria-valuenow")).not.toBe(start);

  await page.keyboard.press("Control+s");
  await page.keyboard.type("Faster cations");
  await page.keyboard.press("Enter");
  await page
    .getByText(/^revision 2/)
    .first()
    .waitFor();

  const choice = page.getByRole("combobox", { name: "Measurement to lay over the prediction" });
  const name = await choice.evaluate((list: HTMLSelectElement) =>
    list.selectedOptions[0].text.replace(/ \([^)]*\)$/, ""),
  );
  await choice.focus();
  await page.keyboard.press("Tab");
  await page.keyboard.press("Enter");
  await page.getByRole("button", { name: `Take ${name} off` }).waitFor();

  await press(page.getByRole("link", { name: "Share", exact: true }), "Enter");
  await press(page.getByRole("button", { name: "Make the link" }), "Enter");
  await expect.poll(() => page.getByRole("textbox", { name: "Share link" }).inputValue()).toMatch(/^http/);
});
