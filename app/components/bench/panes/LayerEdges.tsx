import type { LayerDocument } from "@demilune/solver";
import type { Geometry } from "~/components/charts/geometry";

/** Where one layer ends and the next begins, as hairlines in a plot over depth in nm. */
export function LayerEdges({ layers, geometry }: { layers: readonly LayerDocument[]; geometry: Geometry }) {
  let depth = 0;
  const edges = layers.slice(0, -1).map(({ thicknessNm }) => {
    depth += thicknessNm;
    return depth;
  });
  return edges.map((edge) => (
    <path key={edge} d={`M${geometry.x(edge)},0V${geometry.frame.height}`} stroke="var(--line)" />
  ));
}
