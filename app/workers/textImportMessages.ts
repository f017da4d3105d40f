/** What the import page and its worker say to each other. */
import type { PreviewReading } from "~/lib/textImport/preview";
import type { ImportSettings } from "~/lib/textImport/settings";

export interface ImportRequest {
  sequence: number;
  /** Present with a new file only; the worker keeps it. */
  file?: { name: string; bytes: Uint8Array };
  settings: ImportSettings;
}

export interface ImportAnswer {
  sequence: number;
  reading: PreviewReading;
  milliseconds: number;
}
