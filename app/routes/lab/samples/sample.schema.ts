import { z } from "zod";
import { areaQuantity } from "~/lib/importForm";
import { readQuantity } from "~/lib/quantityText";

const words = (longest: number) => z.string().trim().max(longest, `at most ${longest} characters`).default("");

const area = z
  .string()
  .default("")
  .transform((text, context) => {
    if (text.trim() === "") return null;
    const reading = readQuantity(text, areaQuantity);
    if (reading.ok) return reading.value ?? null;
    context.addIssue({ code: "custom", message: reading.error });
    return z.NEVER;
  });

export const sampleSchema = z.object({
  name: z.string().trim().min(1, "a name is needed").max(120, "at most 120 characters"),
  group: words(120),
  contactSequence: words(300),
  activeAreaCm2: area,
  litAreaCm2: area,
  maskedAreaCm2: area,
  preconditioning: words(2000),
});

export const sampleArchiveSchema = z.object({ intent: z.enum(["archive", "restore"]) });

/** Faults of a form by field. */
export const faultsOf = (error: z.ZodError) =>
  error.issues.map(({ path, message }) => ({ field: String(path[0] ?? ""), message }));
