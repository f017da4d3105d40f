import { z } from "zod";
import { shareDays } from "~/models/shares.server";

/** Most numbers that are exposed one by one; they stand as sliders under the thumb. */
const exposedMost = 3;

const create = z.object({
  intent: z.literal("create"),
  revisionNumber: z.coerce.number().int().min(1),
  days: z.coerce
    .number({ error: `Days: a whole number from 1 to ${shareDays.most}` })
    .int(`Days: a whole number from 1 to ${shareDays.most}`)
    .min(1, `Days: from 1 to ${shareDays.most}`)
    .max(shareDays.most, `Days: from 1 to ${shareDays.most}`),
  note: z.string().trim().max(200, "Label: at most 200 characters"),
  measurementIds: z.array(z.string().max(26)).max(50),
  exposed: z
    .array(z.string().max(200))
    .max(exposedMost, `Numbers to move: at most ${exposedMost}, or none for all of them`),
});

const revoke = z.object({ intent: z.literal("revoke"), shareId: z.string().max(26) });

export const shareAction = z.discriminatedUnion("intent", [create, revoke]);
