import { z } from "zod";

const words = (longest: number) => z.string().trim().max(longest, `at most ${longest} characters`).default("");

/** What belongs to all spectra of the file besides their numbers. */
export const storeSchema = z.object({
  sampleId: z.string().max(26).default(""),
  sampleName: words(120),
  instrument: words(200),
  measuredAt: words(60),
  note: words(4000),
  licence: words(200),
});

/** Name of a spectrum, by its position in the file. */
export const nameSchema = z.string().trim().min(1, "a name is needed").max(160, "at most 160 characters");
