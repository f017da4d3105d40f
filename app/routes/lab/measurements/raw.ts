import { findMeasurement, findRawFileOf } from "~/models/measurements.server";
import { notFound, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/raw";

/** The imported file, byte for byte, as a download that no browser runs or shows. */
export async function loader(args: Route.LoaderArgs) {
  const { lab } = await requireLab(args);
  const measurement = await findMeasurement(lab.id, args.params.measurementId);
  const raw = measurement && (await findRawFileOf(lab.id, measurement));
  if (!raw) throw notFound();
  const plain = raw.file.name.replace(/[^\x20-\x7e]|["\\]/g, "_");
  return new Response(new Blob([new Uint8Array(raw.bytes)]), {
    headers: {
      "Content-Type": "application/octet-stream",
      "Content-Length": String(raw.bytes.length),
      "Content-Disposition": `attachment; filename="${plain}"; filename*=UTF-8''${encodeURIComponent(raw.file.name)}`,
    },
  });
}
