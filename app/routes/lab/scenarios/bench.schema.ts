import { type ScenarioDocument, scenarioSchema } from "@demilune/solver";
import { z } from "zod";

/** A scenario document as JSON text: right in shape and ranges; conditions between fields are the solver's to check. */
const documentText = z.string().transform((text, context): ScenarioDocument => {
  try {
    const parsed = scenarioSchema.safeParse(JSON.parse(text));
    if (parsed.success) return parsed.data;
    context.addIssue({ code: "custom", message: parsed.error.issues.map(({ path }) => path.join(".")).join(", ") });
  } catch {
    context.addIssue({ code: "custom", message: "is no JSON" });
  }
  return z.NEVER;
});

const baseRevisionNumber = z.coerce.number().int().min(1);

export const benchAction = z.discriminatedUnion("intent", [
  z.object({ intent: z.literal("draft"), document: documentText, baseRevisionNumber }),
  z.object({
    intent: z.literal("revision"),
    document: documentText,
    baseRevisionNumber,
    note: z.string().trim().max(200),
  }),
  z.object({ intent: z.literal("compute"), document: documentText }),
  z.object({ intent: z.literal("discard") }),
]);

/** What the address says: an earlier revision to look at. */
export const benchAddress = z.object({ revision: z.coerce.number().int().min(1).optional().catch(undefined) });
