import { useEffect, useRef, useState } from "react";
import type { PreviewReading } from "~/lib/textImport/preview";
import type { ImportSettings } from "~/lib/textImport/settings";
import type { ImportAnswer, ImportRequest } from "./textImportMessages";

interface Reading {
  reading: PreviewReading | null;
  milliseconds: number | null;
  busy: boolean;
  defect: string | null;
}

const startWorker = () => new Worker(new URL("./textImport.worker.ts", import.meta.url), { type: "module" });

/** Reads a file in a Web Worker, again whenever the settings change; late answers are dropped. */
export function useTextImport(file: File | null, settings: ImportSettings): Reading {
  const [state, setState] = useState<Reading>({ reading: null, milliseconds: null, busy: false, defect: null });
  const worker = useRef<Worker | null>(null);
  const sequence = useRef(0);
  const sent = useRef<File | null>(null);

  useEffect(() => () => worker.current?.terminate(), []);

  useEffect(() => {
    if (!file) {
      setState({ reading: null, milliseconds: null, busy: false, defect: null });
      sent.current = null;
      return;
    }
    let current = true;
    const ask = async () => {
      if (!worker.current) {
        worker.current = startWorker();
        worker.current.onmessage = ({ data }: MessageEvent<ImportAnswer>) => {
          if (data.sequence !== sequence.current) return;
          setState({ reading: data.reading, milliseconds: data.milliseconds, busy: false, defect: null });
        };
        worker.current.onerror = (event) =>
          setState((previous) => ({
            ...previous,
            busy: false,
            defect: event.message || "The reader could not be loaded.",
          }));
      }
      sequence.current += 1;
      const request: ImportRequest = { sequence: sequence.current, settings };
      setState((previous) => ({ ...previous, busy: true }));
      if (sent.current !== file) {
        const bytes = new Uint8Array(await file.arrayBuffer());
        if (!current) return;
        request.file = { name: file.name, bytes };
        sent.current = file;
      }
      worker.current.postMessage(request);
    };
    ask().catch((error: unknown) => {
      const message = error instanceof Error ? error.message : String(error);
      setState((previous) => ({ ...previous, busy: false, defect: `The file cannot be read: ${message}` }));
    });
    return () => {
      current = false;
    };
  }, [file, settings]);

  return state;
}
