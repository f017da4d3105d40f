import { z } from "zod";
import { scenarioSorts } from "~/models/scenarios.server";

/** What the address keeps of the list's state; anything unknown falls back to the list as it begins. */
export const listState = z.object({
  q: z.string().trim().max(200).catch(""),
  sort: z.enum(scenarioSorts).catch("updated"),
  order: z.enum(["up", "down"]).optional().catch(undefined),
  show: z.enum(["kept", "archived"]).catch("kept"),
  page: z.coerce.number().int().min(1).max(10_000).catch(1),
});

const scenarioId = z.string().min(1);
export const listAction = z.discriminatedUnion("intent", [
  z.object({ intent: z.literal("archive"), scenarioId }),
  z.object({ intent: z.literal("bringBack"), scenarioId }),
  z.object({ intent: z.literal("duplicate"), scenarioId }),
  z.object({ intent: z.literal("start"), starter: z.string().min(1) }),
]);
