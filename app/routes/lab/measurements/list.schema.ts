import { z } from "zod";
import { measurementSorts } from "~/models/measurements.server";

/** State of the list in its address; what is not understood counts as absent. */
export const listSchema = z.object({
  q: z.string().trim().max(100).catch(""),
  technique: z.enum(["imps", "imvs", "impedance"]).optional().catch(undefined),
  sort: z.enum(measurementSorts).catch("updated"),
  order: z.enum(["up", "down"]).optional().catch(undefined),
  page: z.coerce.number().int().min(1).max(100_000).catch(1),
  archive: z.enum(["1"]).optional().catch(undefined),
});
