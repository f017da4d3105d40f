/** The development server: the same edge, with Vite in front of React Router and no content policy. */
import { createServer } from "vite";

const vite = await createServer({ server: { middlewareMode: true } });
const { run } = (await vite.ssrLoadModule("/app/server/main.ts")) as typeof import("./main");
await run(
  () =>
    vite.ssrLoadModule("virtual:react-router/server-build") as ReturnType<Exclude<Parameters<typeof run>[0], object>>,
  vite.middlewares,
);
