// Starts the built server. Plain JavaScript, because Node 20 runs no TypeScript.
const { serve } = await import("../../build/server/index.js");
await serve();
