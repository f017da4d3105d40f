// Starts the built server. Plain JavaScript, because Node 20 runs no TypeScript.
try {
  const { serve } = await import("../../build/server/index.js");
  await serve();
} catch (error) {
  // A setting that cannot be used is a matter of plain words; settings are read when the bundle is loaded.
  if (error.name !== "SettingsError") throw error;
  process.stderr.write(`${error.message}\n`);
  process.exitCode = 2;
}
