/** A real browser on the running application, which notes every fault of a page. */
import AxeBuilder from "@axe-core/playwright";
import { type Browser, chromium, type Page } from "playwright-core";
import { afterAll, afterEach, beforeAll, expect, inject } from "vitest";

export const desktop = { width: 1440, height: 900 };
export const phone = { width: 390, height: 844 };

export interface Visit {
  page: Page;
  /** Violations of the content policy, console errors, uncaught exceptions, answers of 500 and above. */
  faults: string[];
  /** The path of the demo lab, where one entered it. */
  labPath: string;
}

interface VisitOptions {
  /** Enters the demo lab in this role; a visitor where absent. */
  role?: "owner" | "researcher" | "viewer";
  viewport?: { width: number; height: number };
  colorScheme?: "light" | "dark";
  /** Switched off with false. */
  scripts?: boolean;
}

let browser: Browser | undefined;
const closers: (() => Promise<void>)[] = [];

/** Call once at the top of a test file: one browser for the file, and no test may leave a fault behind. */
export function withBrowser() {
  beforeAll(async () => {
    browser = await chromium.launch({
      executablePath: inject("chromium"),
      args: [
        "--no-sandbox",
        "--disable-gpu",
        "--disable-quic",
        "--no-first-run",
        "--disable-background-networking",
        "--disable-component-update",
        "--disable-sync",
      ],
    });
  });
  afterEach(async () => {
    for (const close of closers.splice(0)) await close();
  });
  afterAll(() => browser?.close());
}

/** Opens a page of its own, with cookies of its own; it is closed after the test, which fails if there were faults. */
export async function visit(options: VisitOptions = {}): Promise<Visit> {
  if (!browser) throw new Error("Call withBrowser() at the top of the test file.");
  const context = await browser.newContext({
    baseURL: inject("origin"),
    viewport: options.viewport ?? desktop,
    colorScheme: options.colorScheme ?? "light",
    reducedMotion: "reduce",
    javaScriptEnabled: options.scripts ?? true,
  });
  // Waits end when what they wait for is there; on a busy machine that takes its time.
  context.setDefaultTimeout(120_000);
  const page = await context.newPage();
  const faults: string[] = [];
  await page.exposeFunction("noteViolation", (text: string) => faults.push(`content policy: ${text}`));
  await page.addInitScript(() => {
    document.addEventListener("securitypolicyviolation", (event) => {
      const note = (globalThis as unknown as { noteViolation(text: string): void }).noteViolation;
      note(`${event.violatedDirective} ${event.blockedURI} ${event.sourceFile}:${event.lineNumber}`);
    });
  });
  page.on("console", (message) => {
    if (message.type() === "error") faults.push(`console: ${message.text()}`);
  });
  page.on("pageerror", (error) => faults.push(`exception: ${error.message}`));
  page.on("response", (response) => {
    if (response.status() >= 500) faults.push(`${response.status()} ${response.url()}`);
  });
  closers.push(async () => {
    await context.close();
    expect(faults).toEqual([]);
  });
  let labPath = "";
  if (options.role) {
    await page.goto("/");
    await page.getByRole("button", { name: `as ${options.role}` }).click();
    await page.waitForURL(/\/lab\/[^/]+\/scenarios\//);
    labPath = new URL(page.url()).pathname.replace(/\/scenarios\/.*/, "");
  }
  return { page, faults, labPath };
}

/** Waits until scripts have taken the page over: before that a click submits a plain form. */
export async function hydrated(page: Page) {
  await page.waitForFunction(() => "__reactRouterDataRouter" in globalThis);
}

/** No finding of axe that is serious or critical, by the rules of WCAG 2.0 to 2.2, A and AA. */
export async function expectAccessible(page: Page) {
  const { violations } = await new AxeBuilder({ page })
    .withTags(["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"])
    .analyze();
  const serious = violations.filter(({ impact }) => impact === "serious" || impact === "critical");
  expect(serious.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(" ")}`)).toEqual([]);
}
