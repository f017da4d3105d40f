/** A file of one's own, from import to overlay to a guest with a share link, in a real browser. */
import { describe, expect, it } from "vitest";
import { degrees, modulus, relaxation, rows } from "../app/textImport/lookAlikes";
import { desktop, expectAccessible, hydrated, phone, visit, withBrowser } from "./visit";

withBrowser();

/** An invented instrument's file: decimal comma, high to low, modulus and phase. */
function instrumentFile(): string {
  const points = relaxation(0.62, 12, 0.1, 5000, 41).toReversed();
  return [
    "# bench 2; IMPS; sample K-17; short circuit; LED 530 nm",
    "# area 0,25 cm2; flux 2,0E+15 cm-2 s-1",
    "f/Hz;|Q|/1;phase/deg",
    ...rows(points, (point) => [point.hz, modulus(point), degrees(point)], ";", ","),
  ].join("\r\n");
}

const upload = (name: string, text: string) => ({ name, mimeType: "text/plain", buffer: Buffer.from(text) });

describe("measured data", () => {
  it("goes from a file with a decimal comma to an overlay, to a guest on a phone, until the link is revoked", {
    timeout: 240_000,
  }, async () => {
    const { page, labPath } = await visit({ role: "researcher", viewport: desktop });
    await page.goto(`${labPath}/measurements/import`);
    await hydrated(page);
    await expectAccessible(page);
    await page.getByLabel("File", { exact: true }).setInputFiles(upload("K-17_imps.txt", instrumentFile()));
    await page.getByRole("heading", { name: "First look: IMPS, 41 points" }).waitFor();
    await page.getByText("commas in 41 of 41 rows, points in none").waitFor();
    await expectAccessible(page);
    // A correction is followed at once, and taken back.
    await page.getByLabel("Technique: change").selectOption("imvs");
    await page
      .getByText("does not belong to IMVS")
      .or(page.getByRole("heading", { name: /First look: IMVS/ }))
      .first()
      .waitFor();
    await page.getByLabel("Technique: change").selectOption("");
    await page.getByRole("heading", { name: "First look: IMPS, 41 points" }).waitFor();
    await page.getByRole("button", { name: "Store measurement" }).click();
    await page.getByRole("heading", { name: "K-17_imps", exact: true }).waitFor();
    await expectAccessible(page);
    expect(await page.getByLabel("Flux / cm⁻² s⁻¹").inputValue()).toBe("2e15");

    await page.goto(`${labPath}/scenarios?q=dye`);
    await page.getByRole("link", { name: "Mesoporous dye film" }).first().click();
    await page.getByLabel("Measurement to lay over the prediction").selectOption({ label: "K-17_imps (IMPS)" });
    await page.getByRole("button", { name: "Lay over" }).click();
    await page.getByRole("button", { name: "Take K-17_imps off" }).waitFor();
    await page.getByRole("slider", { name: /residuals: prediction − measured/ }).waitFor();
    await expectAccessible(page);

    await page.getByRole("link", { name: "Share" }).click();
    await page.getByRole("heading", { name: "Share links" }).waitFor();
    await hydrated(page);
    await expectAccessible(page);
    await page.getByLabel("Label").fill("for the referee");
    await page.getByRole("button", { name: "Make the link" }).click();
    const link = await page.getByLabel("Share link").inputValue();

    const guest = await visit({ viewport: phone, colorScheme: "dark" });
    await guest.page.goto(link);
    await guest.page.waitForURL(/\/shared\/[0-9A-Z]{26}$/);
    await hydrated(guest.page);
    await guest.page
      .getByText(/K-17_imps/)
      .first()
      .waitFor();
    await expectAccessible(guest.page);
    expect(await guest.page.evaluate(() => document.documentElement.scrollWidth <= innerWidth)).toBe(true);
    const plane = guest.page.getByRole("img", { name: /complex plane/ });
    const before = await plane.getAttribute("aria-label");
    const slider = guest.page.getByLabel("Numbers to move").getByRole("slider").first();
    await slider.focus();
    for (let turn = 0; turn < 20; turn++) await slider.press("ArrowLeft");
    await expect.poll(() => plane.getAttribute("aria-label"), { timeout: 120_000 }).not.toBe(before);

    await page.reload();
    await page
      .getByRole("row", { name: /for the referee/ })
      .getByRole("button", { name: "Revoke" })
      .click();
    await page
      .getByRole("row", { name: /for the referee/ })
      .getByText("revoked")
      .waitFor();
    await guest.page.reload();
    await guest.page.getByText("revoked by the lab").waitFor();
    // Chromium writes the 410 into its console; it was meant.
    expect(guest.faults.splice(0)).toEqual([expect.stringContaining("410")]);
  });

  it("is imported without scripts too: the file waits until it is stored", async () => {
    const { page, labPath } = await visit({ role: "researcher", scripts: false });
    await page.goto(`${labPath}/measurements/import`);
    await page.getByLabel("File", { exact: true }).setInputFiles(upload("plain.txt", instrumentFile()));
    await page.getByRole("button", { name: "Look at it" }).click();
    await page.getByRole("heading", { name: "First look: IMPS, 41 points" }).waitFor();
    await page.getByLabel("Sign of the phase: change").selectOption("reversed");
    await page.getByRole("button", { name: "Read again with these corrections" }).click();
    await page.getByText("chosen by you").first().waitFor();
    await page.getByRole("button", { name: "Store measurement" }).click();
    await page.getByRole("heading", { name: "plain", exact: true }).waitFor();
  });

  it("reads a long file whole, and refuses a binary one in one sentence", async () => {
    const { page, labPath } = await visit({ role: "researcher" });
    await page.goto(`${labPath}/measurements/import`);
    await hydrated(page);
    await page
      .getByLabel("File", { exact: true })
      .setInputFiles({ name: "x.bin", mimeType: "application/octet-stream", buffer: Buffer.alloc(500) });
    await page.getByText("The file is binary").waitFor();
    await page.getByRole("button", { name: "Choose another file" }).click();
    const lines = Array.from({ length: 100_000 }, (_, index) => `${index + 1};0,5;-0,25`);
    await page
      .getByLabel("File", { exact: true })
      .setInputFiles(upload("long.txt", ["f/Hz;Re Q;Im Q", ...lines].join("\n")));
    await page.getByRole("heading", { name: "First look: IMPS, 100000 points" }).waitFor();
    await page.getByText("99988 more rows, all read").waitFor();
  });

  it("shows the preview on a phone without a sideways scroll", async () => {
    const { page, labPath } = await visit({ role: "researcher", viewport: phone, colorScheme: "dark" });
    await page.goto(`${labPath}/measurements/import`);
    await hydrated(page);
    await page.getByLabel("File", { exact: true }).setInputFiles(upload("phone.txt", instrumentFile()));
    await page.getByRole("heading", { name: /First look/ }).waitFor();
    await expectAccessible(page);
    expect(await page.evaluate(() => document.documentElement.scrollWidth <= innerWidth)).toBe(true);
  });

  it.each([
    ["desktop, dark", desktop, "dark"],
    ["phone, light", phone, "light"],
  ] as const)("lists and shows without a finding on %s", async (_, viewport, colorScheme) => {
    const { page, labPath } = await visit({ role: "viewer", viewport, colorScheme });
    for (const path of ["/measurements", "/samples"]) {
      await page.goto(labPath + path);
      await hydrated(page);
      await expectAccessible(page);
      expect(await page.evaluate(() => document.documentElement.scrollWidth <= innerWidth)).toBe(true);
    }
    await page.goto(`${labPath}/measurements`);
    await page.getByRole("link", { name: "DF-21, IMPS" }).first().click();
    await page.getByText("Invented data:").waitFor();
    await expectAccessible(page);
    expect(await page.evaluate(() => document.documentElement.scrollWidth <= innerWidth)).toBe(true);
  });
});
