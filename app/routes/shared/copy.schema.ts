import { type ScenarioDocument, scenarioSchema } from "@demilune/solver";
import { z } from "zod";

/** The document as the guest left it, and the lab it goes to; empty for a lab of one's own that is made for it. */
export const copySchema = z.object({
  labId: z.string().max(26),
  document: z.string().transform((text, context): ScenarioDocument => {
    try {
      const parsed = scenarioSchema.safeParse(JSON.parse(text));
      if (parsed.success) return parsed.data;
    } catch {
      // Said below, as for a document of another shape.
    }
    context.addIssue({ code: "custom", message: "is no scenario document" });
    return z.NEVER;
  }),
});
