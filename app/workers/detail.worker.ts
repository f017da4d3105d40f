/** Slower questions about a scenario, in a worker of their own, so that the spectra never wait for them. */
import {
  arcsOf,
  currentVoltageCurve,
  type Failure,
  type Fault,
  harmonicProfilesOf,
  operatingPointsOf,
  parseScenario,
  profilesOf,
  type ScenarioDocument,
  ScenarioError,
  solveSpectra,
} from "@demilune/solver";
import type { NumberedRequest } from "./latestWins";
import { serveLatest } from "./serveLatest";
import type { DetailAnswer, DetailName, DetailQuestion, Details } from "./solverMessages";

const post = (answer: DetailAnswer) => self.postMessage(answer);

const faultOf = ({ step, message }: Failure): Fault => ({
  path: step,
  message,
  allowed: "an operating point that can be reached",
});

function solved<Value extends { status: string }>(value: Value | { status: "failed"; failure: Failure }): Value {
  if ("failure" in value) throw new ScenarioError([faultOf(value.failure)]);
  return value;
}

function answerTo(question: DetailQuestion): Details[DetailName]["answer"] {
  if (question.name === "arcs") {
    const { arcs, noise, approximation } = arcsOf(question.curve);
    return { arcs, noise, valleysHz: approximation.valleysHz };
  }
  const scenario = parseScenario(question.document);
  switch (question.name) {
    case "currentVoltage": {
      const light = currentVoltageCurve(scenario, { ions: "follow" });
      const range = { fromV: light.voltageV[0], toV: light.voltageV.at(-1) };
      const { heldAt } = question;
      return {
        light,
        held: heldAt && currentVoltageCurve(scenario, { ions: heldAt, ...range }),
        dark: currentVoltageCurve(scenario, { ions: "follow", fluxPerCm2S: 0, ...range }),
      };
    }
    case "profiles":
      return solved(profilesOf(operatingPointsOf(scenario), question));
    case "harmonicProfiles":
      return solved(harmonicProfilesOf(operatingPointsOf(scenario), question));
    case "otherModel": {
      const document = { ...(question.document as ScenarioDocument), model: question.model };
      const other = parseScenario(document);
      return solveSpectra({ ...other, spectra: [other.spectra[question.shown]] }).spectra[0];
    }
  }
}

serveLatest<DetailQuestion & NumberedRequest>((request) => {
  const { sequence } = request;
  try {
    post({ kind: "answered", sequence, value: answerTo(request) });
  } catch (error) {
    if (error instanceof ScenarioError) post({ kind: "refused", sequence, faults: error.faults });
    else post({ kind: "defect", sequence, message: error instanceof Error ? error.message : String(error) });
  }
});
