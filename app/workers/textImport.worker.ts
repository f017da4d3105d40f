/** Reads measurement files beside the page, so that a long one does not freeze it. */
import { previewOf } from "~/lib/textImport/preview";
import { readMeasurementText } from "~/lib/textImport/readText";
import type { ImportAnswer, ImportRequest } from "./textImportMessages";

let file: ImportRequest["file"];

self.onmessage = ({ data }: MessageEvent<ImportRequest>) => {
  file = data.file ?? file;
  if (!file) return;
  const start = performance.now();
  const reading = previewOf(readMeasurementText(file.bytes, file.name, data.settings));
  const answer: ImportAnswer = { sequence: data.sequence, reading, milliseconds: performance.now() - start };
  self.postMessage(answer);
};
