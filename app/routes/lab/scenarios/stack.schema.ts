import { z } from "zod";

const base = z.coerce.number().int().min(1);
const document = z.string().max(1_000_000);

export const stackAction = z.discriminatedUnion("intent", [
  z.object({
    intent: z.literal("save"),
    document,
    base,
    note: z.string().trim().max(500, "A note has at most 500 characters.").default(""),
  }),
  z.object({ intent: z.literal("draft"), document, base }),
  z.object({ intent: z.literal("dropDraft") }),
]);
