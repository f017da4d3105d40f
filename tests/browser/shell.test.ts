/** The shell in a real browser: entrance, sign-in, themes, keyboard, errors. */
import { describe, expect, it } from "vitest";
import { desktop, expectAccessible, hydrated, phone, visit, withBrowser } from "./visit";

withBrowser();

const both = [
  { name: "desktop, light", viewport: desktop, colorScheme: "light" },
  { name: "phone, dark", viewport: phone, colorScheme: "dark" },
] as const;

describe.each(both)("on $name", ({ viewport, colorScheme }) => {
  it("shows every page of the shell without a fault, an accessibility finding or a sideways scroll", async () => {
    const { page, faults, labPath } = await visit({ role: "owner", viewport, colorScheme });
    const paths = ["/no/such/page", "/", "/account", "/mailbox", labPath, `${labPath}/people`, `${labPath}/activity`];
    for (const path of paths) {
      await page.goto(path);
      await hydrated(page);
      await expectAccessible(page);
      expect(await page.evaluate(() => document.documentElement.scrollWidth <= innerWidth)).toBe(true);
      // Chromium writes every 404 into its console; the first path was meant to give one.
      if (path === paths[0]) expect(faults.splice(0)).toEqual([expect.stringContaining("404")]);
    }
  });

  it("shows the pages of a visitor", async () => {
    const { page } = await visit({ viewport, colorScheme });
    for (const path of ["/", "/sign-in", "/sign-in/code"]) {
      await page.goto(path);
      await hydrated(page);
      await expectAccessible(page);
    }
  });
});

describe("the shell", () => {
  it("signs in by the code in the mailbox, leads on to where one wanted to go, and out again", async () => {
    const { page } = await visit();
    await page.goto("/account");
    expect(new URL(page.url()).pathname).toBe("/sign-in");
    await page.getByLabel("E-mail address").fill("sunniva@halden.example");
    await page.getByRole("button", { name: "Send the code" }).click();
    await page.getByRole("heading", { name: "Look into your mail" }).waitFor();
    await page.getByRole("link", { name: "Mailbox" }).click();
    await page
      .getByRole("link", { name: /sign-in\/code/ })
      .first()
      .click();
    await page.getByRole("button", { name: "Sign in" }).click();
    await page.getByRole("heading", { name: "Sunniva Brekk" }).waitFor();
    expect(new URL(page.url()).pathname).toBe("/account");
    await page.getByRole("button", { name: "Sign out" }).click();
    await page.getByRole("banner").getByRole("link", { name: "Sign in" }).waitFor();
  });

  it("keeps what was typed when an address cannot be used", async () => {
    const { page, faults } = await visit();
    await page.goto("/sign-in");
    await hydrated(page);
    await page.getByLabel("E-mail address").fill("sunniva at halden");
    await page.getByRole("button", { name: "Send the code" }).click();
    await page.getByText("is not an e-mail address").waitFor();
    expect(await page.getByLabel("E-mail address").inputValue()).toBe("sunniva at halden");
    // Chromium writes every 400 into its console; this one was meant.
    expect(faults.splice(0)).toEqual([expect.stringContaining("400")]);
  });

  it("works without scripts: demo entrance and theme are plain forms", async () => {
    const { page } = await visit({ scripts: false });
    await page.goto("/");
    await page.getByRole("button", { name: "as viewer" }).click();
    await page.getByRole("heading", { level: 1, name: "p-i-n perovskite, mobile cations" }).waitFor();
    await page.getByRole("button", { name: "dark", exact: true }).click();
    await page.locator("html[data-theme=dark]").waitFor();
  });

  it("changes the colours at once, keeps the choice, and gives it back to the system", async () => {
    const { page } = await visit({ role: "viewer" });
    await hydrated(page);
    const paper = () => page.evaluate(() => getComputedStyle(document.body).backgroundColor);
    expect(await paper()).toBe("rgb(246, 248, 248)");
    await page.getByRole("button", { name: "dark", exact: true }).click();
    await page.locator("html[data-theme=dark]").waitFor();
    expect(await paper()).toBe("rgb(14, 22, 27)");
    await page.reload();
    expect(await paper()).toBe("rgb(14, 22, 27)");
    await hydrated(page);
    await page.getByRole("button", { name: "dark", exact: true }).click();
    await page.locator("html[data-theme=auto]").waitFor();
    expect(await paper()).toBe("rgb(246, 248, 248)");
  });

  it("moves the focus to the heading of a new page, and offers the way past the header first", async () => {
    const { page, labPath } = await visit({ role: "viewer" });
    await page.goto(labPath);
    await hydrated(page);
    await page.keyboard.press("Tab");
    expect(await page.evaluate(() => document.activeElement?.textContent)).toBe("Skip to the content");
    await page.getByRole("link", { name: "People" }).click();
    await page.getByRole("heading", { name: "People" }).waitFor();
    await page.waitForFunction(() => document.activeElement?.tagName === "H1");
  });

  it("says what is not there, in one's own words and with the way back", async () => {
    const { page, faults } = await visit({ role: "viewer" });
    await page.goto("/lab/01ARZ3NDEKTSV4RRFFQ69G5FAV");
    await page.getByRole("heading", { name: "Not here" }).waitFor();
    expect(faults.splice(0)).toEqual([expect.stringContaining("404")]);
    await page.getByRole("link", { name: "To the first page" }).click();
    await page.getByRole("heading", { name: "Which process makes each arc" }).waitFor();
  });
});
