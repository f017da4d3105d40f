/**
 * Repaint of the bench while a value is dragged, in Chromium on the built application: from the pointer event to the
 * frame that shows the new curve.
 */
import { createClient } from "@libsql/client";
import { chromium, type Page } from "playwright-core";
import buildOnce from "../support/build.ts";
import { requireChromium } from "../support/chromium.ts";
import { startServer } from "../support/server.ts";
import { timingOf, words } from "./timing.ts";

interface Drag {
  scenario: string;
  /** Spoken name of the number that is dragged. */
  number: RegExp;
  /** ms within which a repaint is promised. */
  bar: number;
  /** What is asked for instead of what the starter asks for; nothing is then laid over. */
  ask?: object;
}

const drags: Record<string, Drag> = {
  closedForm: { scenario: "Mesoporous dye film", number: /electron lifetime/, bar: 33 },
  /** The promise's own case: IMPS and IMVS at 41 frequencies, nothing laid over. */
  fullModel41: {
    scenario: "p-i-n perovskite, mobile cations, better film",
    number: /cation mobility/,
    bar: 100,
    ask: {
      spectra: [{ technique: "imps" }, { technique: "imvs" }],
      frequencies: { fromHz: 0.1, toHz: 1e7, pointsPerDecade: 5 },
    },
  },
  fullModel: { scenario: "p-i-n perovskite, mobile cations", number: /cation mobility/, bar: 100 },
};

const warmUps = 10;
const moves = 60;

/** Resolves with the ms from the next pointer event to the frame in which a curve has changed. */
const nextRepaint = (page: Page) =>
  page.evaluate(
    () =>
      new Promise<number>((resolve) => {
        let start = 0;
        // No named function in here: tsx would wrap it in a helper that the page does not have.
        const listening = new AbortController();
        addEventListener(
          "pointermove",
          (event) => {
            start ||= event.timeStamp;
          },
          { capture: true, signal: listening.signal },
        );
        const watch = new MutationObserver(() => {
          if (start === 0) return;
          watch.disconnect();
          listening.abort();
          const painted = new MessageChannel();
          painted.port1.onmessage = () => resolve(performance.now() - start);
          requestAnimationFrame(() => painted.port2.postMessage(null));
        });
        for (const plot of document.querySelectorAll(".plot-surface svg"))
          watch.observe(plot, { subtree: true, attributes: true, attributeFilter: ["d"] });
      }),
  );

async function times(page: Page, { number }: Drag): Promise<number[]> {
  const field = page.getByRole("spinbutton", { name: number }).first();
  await field.scrollIntoViewIfNeeded();
  const place = await field.boundingBox();
  if (!place) throw new Error(`The number ${number} is not on the page`);
  const x = place.x + place.width / 2;
  const y = place.y + place.height / 2;
  await page.mouse.move(x, y);
  await page.mouse.down();
  await page.mouse.move(x + 5, y);
  await page.waitForTimeout(300);
  const found: number[] = [];
  for (let move = 0; move < warmUps + moves; move++) {
    const repaint = nextRepaint(page);
    await page.mouse.move(x + 8 + 20 * Math.abs((move % 6) - 3), y);
    const milliseconds = await repaint;
    if (move >= warmUps) found.push(milliseconds);
  }
  await page.mouse.up();
  return found;
}

export async function run(say: (line: string) => void) {
  buildOnce();
  const server = await startServer();
  const browser = await chromium.launch({ executablePath: requireChromium(), args: ["--no-sandbox", "--disable-gpu"] });
  try {
    const page = await browser.newPage({ baseURL: server.origin, viewport: { width: 1440, height: 900 } });
    await page.goto("/");
    await page.getByRole("button", { name: "as researcher" }).click();
    await page.waitForURL(/\/lab\/[^/]+\/scenarios\/[^/]+$/);
    const client = createClient({ url: `file:${server.dataFolder}/demilune.db`, timeout: 10_000 });
    const results: Record<string, object> = {};
    for (const [name, drag] of Object.entries(drags)) {
      const lab = new URL(page.url()).pathname.split("/")[2];
      const sql = "SELECT id FROM scenarios WHERE lab_id = ? AND name = ?";
      const { rows } = await client.execute({ sql, args: [lab, drag.scenario] });
      const scenarioId = String(rows[0].id);
      if (drag.ask) {
        const change = "UPDATE revisions SET document = json_patch(document, ?) WHERE scenario_id = ?";
        await client.execute({ sql: change, args: [JSON.stringify(drag.ask), scenarioId] });
        await client.execute({ sql: "DELETE FROM overlays WHERE scenario_id = ?", args: [scenarioId] });
      }
      await page.goto(`/lab/${lab}/scenarios/${scenarioId}`);
      await page.waitForFunction(
        () => document.querySelector("[data-milliseconds]")?.getAttribute("data-busy") === "false",
      );
      const worker = async () => Number(await page.getAttribute("[data-milliseconds]", "data-milliseconds"));
      const found = (await times(page, drag)).toSorted((one, other) => one - other);
      const timing = timingOf(found);
      const late = found[Math.ceil(0.95 * found.length) - 1];
      say(
        `${name}: ${words(timing)}, 95 % within ${late.toFixed(1)} ms; promised ${drag.bar} ms; worker, last answer ${(await worker()).toFixed(1)} ms`,
      );
      results[name] = { ...timing, p95Ms: late, promisedMs: drag.bar };
    }
    client.close();
    return results;
  } finally {
    await browser.close();
    await server.stop();
  }
}
