/** Scenarios, stacks, revisions and materials in a real browser. */
import type { Page } from "playwright-core";
import { describe, expect, it } from "vitest";
import { desktop, expectAccessible, hydrated, phone, visit, withBrowser } from "./visit";

withBrowser();

const perovskite = "p-i-n perovskite, mobile cations";

/** A scenario of its own for a test, from the first starter; resolves with its path. */
async function beginFromStarter(page: Page, labPath: string): Promise<string> {
  await page.goto(`${labPath}/scenarios/new`);
  await hydrated(page);
  await page.getByRole("button", { name: `Begin with ${perovskite}`, exact: true }).click();
  await page.waitForURL(/\/scenarios\/[0-9A-Z]{26}/);
  return new URL(page.url()).pathname;
}

async function openStack(page: Page, path: string) {
  await page.goto(`${path}/stack`);
  await hydrated(page);
}

const cell = (page: Page, name: string) => page.getByRole("textbox", { name });

describe.each([
  { name: "desktop, light", viewport: desktop, colorScheme: "light" },
  { name: "phone, dark", viewport: phone, colorScheme: "dark" },
] as const)("on $name", ({ viewport, colorScheme }) => {
  it("shows every page of scenarios and materials without a fault, an accessibility finding or a sideways scroll", async () => {
    const { page, labPath } = await visit({ role: "researcher", viewport, colorScheme });
    const path = await beginFromStarter(page, labPath);
    await page.goto(`${labPath}/materials`);
    const material = await page.getByRole("link", { name: /Gallium arsenide/ }).getAttribute("href");
    const pages = [
      `${labPath}/scenarios`,
      `${labPath}/scenarios?q=nothing-has-this-name`,
      `${labPath}/scenarios/new`,
      `${path}/stack`,
      `${path}/revisions`,
      `${path}/revisions/1`,
      `${path}/difference?from=1&to=1`,
      `${labPath}/materials`,
      `${labPath}/materials/new`,
      material!,
      `${material}?edit`,
    ];
    for (const one of pages) {
      await page.goto(one);
      await hydrated(page);
      await expectAccessible(page);
      expect([one, await page.evaluate(() => document.documentElement.scrollWidth <= innerWidth)]).toEqual([one, true]);
    }
  }, 300_000);
});

describe("a scenario", () => {
  it("is begun from a starter, edited with units, saved, compared, restored, archived and brought back", async () => {
    const { page, labPath } = await visit({ role: "researcher" });
    const path = await beginFromStarter(page, labPath);
    await openStack(page, path);
    await cell(page, "thickness of perovskite, in nm").fill("0,4 µm");
    await page.getByText("= 400\u2009nm").waitFor();
    await page.keyboard.press("Enter");
    await page.getByRole("button", { name: /Layer 2 of 3: perovskite, 400\s?nm/ }).waitFor();
    await page.getByLabel("Note on the revision").fill("thinner film");
    await page.getByRole("button", { name: "Save revision" }).click();
    await page.getByText("Saved as revision 2").waitFor();

    await page.getByRole("link", { name: "Revisions" }).click();
    await page.getByText("thinner film").waitFor();
    await page.getByRole("button", { name: "Compare the two" }).click();
    await page.getByText("One thing differs.").waitFor();
    const row = page.getByRole("row", { name: /thickness \(perovskite\)/ });
    expect(await row.getByRole("cell").allInnerTexts()).toEqual(["500\u2009nm", "400\u2009nm", "÷ 1.25"]);

    await page.getByRole("button", { name: "Restore revision 1" }).click();
    await page.getByText("Revision 1 is the newest again, as revision 3.").waitFor();
    await page.goto(`${path}/difference?from=1&to=3`);
    await page.getByText("The two revisions hold the same scenario.").waitFor();
    const document = await page.request.get(`${path}/document.json?revision=2`);
    expect((await document.json()).stack.layers[1].thicknessNm).toBe(400);

    await page.goto(`${labPath}/scenarios`);
    await hydrated(page);
    const id = path.split("/").at(-1);
    const listed = page.locator("tbody tr", { has: page.locator(`a[href="${path}"]`) });
    await listed.getByRole("button", { name: /^Archive/ }).click();
    await page.getByText(`${perovskite} is in the archive now.`).waitFor();
    expect(new URL(page.url()).searchParams.get("archived")).toBe(id);
    expect(await listed.count()).toBe(0);
    await page.getByRole("button", { name: "Undo" }).click();
    await listed.waitFor();
  });

  it("keeps what cannot be read, says why, and a page that is left keeps its draft", async () => {
    const { page, labPath } = await visit({ role: "researcher" });
    const path = await beginFromStarter(page, labPath);
    await openStack(page, path);
    const gap = cell(page, "band gap of perovskite, in eV");
    await gap.fill("1.234,5");
    await gap.blur();
    await page.getByText("more than one decimal mark").waitFor();
    expect(await gap.inputValue()).toBe("1.234,5");
    await gap.press("Escape");
    expect(await gap.inputValue()).toBe("1.6");
    await gap.fill("1,55 eV");
    await gap.press("Enter");
    await page.getByText("Draft of revision 1 is kept").waitFor();
    await page.reload();
    await hydrated(page);
    expect(await gap.inputValue()).toBe("1.55");
    await page.getByRole("button", { name: "Discard my draft" }).click();
    await page.waitForFunction(() => !document.body.innerText.includes("Discard my draft"));
    expect(await gap.inputValue()).toBe("1.6");
  });

  it("is arranged by keyboard alone, with undo and redo", async () => {
    const { page, labPath } = await visit({ role: "researcher" });
    const path = await beginFromStarter(page, labPath);
    await openStack(page, path);
    const order = async () =>
      (await page.getByRole("button", { name: /^Layer \d of/ }).allInnerTexts()).map((text) => text.split("\n")[0]);
    await page.getByRole("button", { name: /Layer 1 of 3/ }).focus();
    await page.keyboard.press("Alt+ArrowDown");
    expect(await order()).toEqual(["perovskite", "hole transport layer", "electron transport layer"]);
    expect(await page.evaluate(() => document.activeElement?.getAttribute("aria-label"))).toContain(
      "Layer 2 of 3: hole",
    );
    await page
      .getByText(/were dropped: the two are no longer neighbours/)
      .first()
      .waitFor();
    await page.keyboard.press("Delete");
    expect(await order()).toEqual(["perovskite", "electron transport layer"]);
    await page.keyboard.press("Control+z");
    await page.keyboard.press("Control+z");
    expect(await order()).toEqual(["hole transport layer", "perovskite", "electron transport layer"]);
    await page.keyboard.press("Control+Shift+z");
    expect(await order()).toEqual(["perovskite", "hole transport layer", "electron transport layer"]);
  });

  it("never covers up what somebody saved in between", async () => {
    const { page, faults, labPath } = await visit({ role: "researcher" });
    const path = await beginFromStarter(page, labPath);
    await openStack(page, path);
    const other = await visit({ role: "owner" });
    await openStack(other.page, path);
    await cell(other.page, "relative permittivity of perovskite, in 1").fill("30");
    await other.page.keyboard.press("Enter");
    await other.page.getByRole("button", { name: "Save revision" }).click();
    await other.page.getByText("Saved as revision 2").waitFor();

    await cell(page, "thickness of perovskite, in nm").fill("600");
    await page.keyboard.press("Enter");
    await page.getByRole("button", { name: "Save revision" }).click();
    await page.getByText("Not saved: revision 2 came in between").waitFor();
    // Chromium writes the answer 409 into its console.
    expect(faults.splice(0)).toEqual([expect.stringContaining("409")]);
    await page.getByRole("button", { name: "Put mine on top of it" }).click();
    await page.getByRole("button", { name: "Save revision" }).click();
    await page.getByText("Saved as revision 3").waitFor();
  });

  it("takes layers from a spreadsheet after a preview", async () => {
    const { page, labPath } = await visit({ role: "researcher" });
    const path = await beginFromStarter(page, labPath);
    await openStack(page, path);
    await page.getByText("Paste layers from a spreadsheet").click();
    const box = page.getByLabel("Table of layers", { exact: true });
    await box.fill("name\tthickness (µm)\tgap\nperovskite\t0,7\t1.234,5");
    await page.getByText("1 of 1 rows cannot be taken yet.").waitFor();
    await box.fill("name\tthickness (µm)\tgap\nperovskite\t0,7\t1.5");
    await page.getByRole("button", { name: "Replace the stack by this layer" }).click();
    await page.getByRole("button", { name: /Layer 1 of 1: perovskite, 700\s?nm/ }).waitFor();
    expect(await cell(page, "band gap of perovskite, in eV").inputValue()).toBe("1.5");
  });

  it("comes from a document, whose faults are named with their path while its text stays", async () => {
    const { page, faults, labPath } = await visit({ role: "researcher" });
    await page.goto(`${labPath}/scenarios/new`);
    await hydrated(page);
    const text = '{"format":"demilune.scenario/1","stack":{"layers":[]},"light":{"fluxPerCm2S":-1}}';
    await page.getByLabel("Or the document itself").fill(text);
    await page.getByRole("button", { name: "Take the document" }).click();
    await page.getByText("light.fluxPerCm2S").waitFor();
    await page.getByText("stack.layers", { exact: true }).waitFor();
    expect(await page.getByLabel("Or the document itself").inputValue()).toBe(text);
    expect(faults.splice(0)).toEqual([expect.stringContaining("400")]);
  });
});

describe("a viewer", () => {
  it("reads stacks, revisions and materials and is offered nothing to change", async () => {
    const { page, labPath } = await visit({ role: "viewer" });
    await page.goto(`${labPath}/scenarios`);
    await hydrated(page);
    expect(await page.getByRole("button", { name: /Archive|Copy/ }).count()).toBe(0);
    const path = await page.locator("tbody a").first().getAttribute("href");
    await openStack(page, path!);
    expect(await page.getByRole("button", { name: "Save revision" }).count()).toBe(0);
    expect(await page.locator("table input").count()).toBe(0);
    await page.goto(`${labPath}/materials`);
    expect(await page.getByRole("link", { name: "New material" }).count()).toBe(0);
  });
});

describe("the materials shelf", () => {
  it("keeps a material with the source of each value and gives it to a stack", async () => {
    const { page, faults, labPath } = await visit({ role: "researcher" });
    await page.goto(`${labPath}/materials/new`);
    await hydrated(page);
    await page.getByLabel("Name", { exact: true }).fill("Test oxide");
    await page.getByLabel("Thickness", { exact: true }).fill("0,1 µm");
    await page.getByLabel("Source of the thickness").fill("ellipsometry, our own");
    await page.getByLabel("Band gap", { exact: true }).fill("99 eV");
    await page.getByRole("button", { name: "Put on the shelf" }).click();
    await page.getByRole("heading", { name: /one entry needs another look/ }).waitFor();
    expect(await page.getByLabel("Thickness", { exact: true }).inputValue()).toBe("0,1 µm");
    await page.getByRole("link", { name: /band gap: 99/ }).click();
    expect(await page.evaluate(() => document.activeElement?.getAttribute("name"))).toBe("number-gapEV");
    expect(faults.splice(0)).toEqual([expect.stringContaining("400")]);
    await page.getByLabel("Band gap", { exact: true }).fill("3.2 eV");
    await page.getByRole("button", { name: "Put on the shelf" }).click();
    await page.getByRole("heading", { name: "Test oxide" }).waitFor();
    expect(await page.getByRole("row", { name: /^thickness/ }).innerText()).toContain("ellipsometry, our own");

    const path = await beginFromStarter(page, labPath);
    await openStack(page, path);
    await page.getByLabel("Add a layer from the materials shelf").selectOption({ label: "Test oxide" });
    await page.getByRole("button", { name: /Layer 2 of 4: Test oxide, 100\s?nm/ }).waitFor();
  });
});
