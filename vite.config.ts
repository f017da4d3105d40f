import { reactRouter } from "@react-router/dev/vite";
import tailwindcss from "@tailwindcss/vite";
import { defineConfig, type Plugin } from "vite";

/** Emits the worker thread of the server's pool as a chunk of its own beside the server bundle. */
const serverWorker: Plugin = {
  name: "server-worker",
  applyToEnvironment: ({ name }) => name === "ssr",
  buildStart() {
    if (this.environment.mode === "build")
      this.emitFile({ type: "chunk", id: "app/queue/solve.worker.ts", fileName: "solve.worker.js" });
  },
};

export default defineConfig({
  plugins: [tailwindcss(), reactRouter(), serverWorker],
  resolve: { tsconfigPaths: true },
  worker: { format: "es" },
  // React Router reads its server input under this (older) name.
  environments: { ssr: { build: { rollupOptions: { input: "./app/server/production.ts" } } } },
});
