/** Scenario documents as text that people upload or paste, and what is wrong with them in words. */
import { type Fault, parseScenario, type ScenarioDocument, ScenarioError } from "@demilune/solver";
import { jsonFaultPlace } from "./jsonFault";

export type DocumentReading = { ok: true; document: ScenarioDocument } | { ok: false; faults: readonly Fault[] };

/** Longest document taken, in characters; a hundred layers with every field are below 200 000. */
const longestDocument = 500_000;

/** Check a document of any origin; the faults carry path, what is wrong, and what is allowed. */
export function readDocument(input: unknown): DocumentReading {
  try {
    parseScenario(input);
    return { ok: true, document: input as ScenarioDocument };
  } catch (error) {
    if (error instanceof ScenarioError) return { ok: false, faults: error.faults };
    throw error;
  }
}

/** Read a document from text: first as JSON, then as a scenario. */
export function readDocumentText(text: string): DocumentReading {
  const refused = (message: string, allowed: string): DocumentReading => ({
    ok: false,
    faults: [{ path: "document", message, allowed }],
  });
  if (text.trim() === "") return refused("is empty", "a scenario document as JSON");
  if (text.length > longestDocument)
    return refused(`has ${text.length} characters`, `at most ${longestDocument} characters`);
  try {
    return readDocument(JSON.parse(text.replace(/^\ufeff/, "")));
  } catch (error) {
    if (!(error instanceof SyntaxError)) throw error;
    const { line, column } = jsonFaultPlace(text);
    return refused(`is not JSON from line ${line}, column ${column} on`, "a scenario document as JSON");
  }
}
