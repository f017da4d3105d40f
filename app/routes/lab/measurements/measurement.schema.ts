import { quantities } from "@demilune/solver";
import { z } from "zod";
import { readQuantity } from "~/lib/quantityText";

const words = (longest: number) => z.string().trim().max(longest, `at most ${longest} characters`);

/** A typed quantity that may be left empty. */
function optionalQuantity(name: "fluxPerCm2S" | "temperatureK" | "voltageV") {
  return z.string().transform((text, context) => {
    if (text.trim() === "") return null;
    const reading = readQuantity(text, quantities[name]);
    if (reading.ok) return reading.value ?? null;
    context.addIssue({ code: "custom", message: reading.error });
    return z.NEVER;
  });
}

export const changeSchema = z
  .object({
    intent: z.literal("change"),
    name: words(160).min(1, "a name is needed"),
    sampleId: z.string().max(26),
    bias: z.enum(["shortCircuit", "openCircuit", "voltage"]),
    biasVoltageV: optionalQuantity("voltageV"),
    fluxPerCm2S: optionalQuantity("fluxPerCm2S"),
    temperatureK: optionalQuantity("temperatureK"),
    instrument: words(200),
    measuredAt: words(60),
    note: words(4000),
    licence: words(200),
  })
  .refine(({ bias, biasVoltageV }) => bias !== "voltage" || biasVoltageV !== null, {
    path: ["biasVoltageV"],
    message: "a voltage is needed",
  });

export const archiveSchema = z.object({ intent: z.enum(["archive", "restore"]) });
