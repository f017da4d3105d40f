/** The forms of the main job with scripts switched off. */
import { describe, expect, it } from "vitest";
import { visit, withBrowser } from "./visit";

withBrowser();

describe("without scripts", () => {
  it("one signs in by the code in the mailbox and out again", async () => {
    const { page } = await visit({ scripts: false });
    await page.goto("/sign-in");
    await page.getByLabel("E-mail address").fill("sunniva@halden.example");
    await page.getByRole("button", { name: "Send the code" }).click();
    await page.getByRole("heading", { name: "Look into your mail" }).waitFor();
    await page.getByRole("link", { name: "Mailbox" }).click();
    const mail = await page
      .getByText(/code is \d{4} \d{4}/)
      .first()
      .textContent();
    const [code] = /\d{4} \d{4}/.exec(mail!)!;
    await page.goto("/sign-in/code");
    await page.getByLabel("Code").fill(code);
    await page.getByRole("button", { name: "Sign in" }).click();
    await page.getByRole("button", { name: "Sign out" }).click();
    await page.getByRole("link", { name: "Sign in" }).first().waitFor();
  });

  it("a scenario begins from a starter, takes an edited number as a revision, and is shared by a link", async () => {
    const { page, labPath, faults } = await visit({ role: "researcher", scripts: false });
    await page.goto(`${labPath}/scenarios/new`);
    await page.getByRole("button", { name: "Begin with p-i-n perovskite, mobile cations", exact: true }).click();
    await page.waitForURL(/\/scenarios\/[0-9A-Z]{26}/);
    const path = new URL(page.url()).pathname;

    const thickness = page.getByRole("textbox", { name: "thickness of perovskite, in nm" });
    await page.goto(`${path}/stack`);
    await thickness.fill("0,4 mm of something");
    await page.getByRole("button", { name: "Save revision" }).click();
    // What cannot be read is kept where it was typed.
    expect(await thickness.inputValue()).toBe("0,4 mm of something");
    // Chromium writes the 400 into its console; it was meant.
    expect(faults.splice(0)).toEqual([expect.stringContaining("400")]);
    await thickness.fill("0,4 µm");
    await page.getByLabel("Note on the revision").fill("thinner film");
    await page.getByRole("button", { name: "Save revision" }).click();
    await page.getByText("Saved as revision 2").waitFor();
    expect(await thickness.inputValue()).toBe("400");

    await page.goto(`${path}/shares`);
    await page.getByLabel("Label").fill("for a colleague");
    await page.getByRole("button", { name: "Make the link" }).click();
    const link = await page.getByLabel("Share link").inputValue();
    const guest = await visit({ scripts: false });
    await guest.page.goto(link);
    await guest.page.waitForURL(/\/shared\/[0-9A-Z]{26}$/);
    await guest.page.getByRole("heading", { level: 1, name: /p-i-n perovskite/ }).waitFor();
  });
});
