import pino from "pino";
import { settings } from "./settings.server";

/**
 * JSON lines on standard output, times in UTC. An event has a name and plain facts: never a code, a token, a cookie,
 * a mail's text, a query string or uploaded data.
 */
export const log = pino({
  level: settings().logLevel,
  base: null,
  messageKey: "event",
  timestamp: () => `,"ts":"${new Date().toISOString()}"`,
  formatters: { level: (level) => ({ level }) },
});
