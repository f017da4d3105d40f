import { reactRouter } from "@react-router/dev/vite";
import tailwindcss from "@tailwindcss/vite";
import { defineConfig } from "vite";

export default defineConfig({
  plugins: [tailwindcss(), reactRouter()],
  resolve: { tsconfigPaths: true },
  worker: { format: "es" },
  // React Router reads its server input under this (older) name.
  environments: { ssr: { build: { rollupOptions: { input: "./app/server/production.ts" } } } },
});
