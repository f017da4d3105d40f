import { index, layout, type RouteConfig, route } from "@react-router/dev/routes";

export default [
  layout("routes/public/layout.tsx", [
    index("routes/public/landing.tsx"),
    route("sign-in", "routes/account/signIn.tsx"),
    route("sign-in/code", "routes/account/signInCode.tsx"),
    route("account", "routes/account/account.tsx"),
    route("mailbox", "routes/public/mailbox.tsx"),
    route("*", "routes/public/notFound.tsx"),
  ]),
  route("s/:token", "routes/shared/open.tsx"),
  route("shared/:shareId", "routes/shared/guest.tsx"),
  route("shared/:shareId/copy", "routes/shared/copy.ts"),
  route("demo", "routes/public/demo.ts"),
  route("theme", "routes/public/theme.ts"),
  route("labs/new", "routes/account/newLab.ts"),
  route("sign-out", "routes/account/signOut.ts"),
  route("lab/:labId", "routes/lab/layout.tsx", [
    index("routes/lab/index.tsx"),
    route("people", "routes/lab/people.tsx"),
    route("activity", "routes/lab/activity.tsx"),
    route("scenarios/:scenarioId", "routes/lab/scenarios/bench.tsx"),
    route("scenarios/:scenarioId/prediction.csv", "routes/lab/scenarios/predictionCsv.ts"),
    route("scenarios/:scenarioId/overlays", "routes/lab/scenarios/overlays.ts"),
    route("scenarios/:scenarioId/shares", "routes/lab/scenarios/shares.tsx"),
    route("measurements", "routes/lab/measurements/list.tsx"),
    route("measurements/import", "routes/lab/measurements/import.tsx"),
    route("measurements/:measurementId", "routes/lab/measurements/measurement.tsx"),
    route("measurements/:measurementId/raw", "routes/lab/measurements/raw.ts"),
    route("samples", "routes/lab/samples/list.tsx"),
    route("samples/:sampleId", "routes/lab/samples/sample.tsx"),
  ]),
] satisfies RouteConfig;
