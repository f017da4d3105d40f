import { z } from "zod";

const name = z.string().trim().max(200, "A name has at most 200 characters.");

export const newAction = z.discriminatedUnion("intent", [
  z.object({ intent: z.literal("start"), starter: z.string().min(1) }),
  z.object({ intent: z.literal("blank"), name: name.min(1, "A name is needed.") }),
  z.object({
    intent: z.literal("document"),
    text: z.string().default(""),
    file: z.instanceof(File).optional(),
  }),
]);
