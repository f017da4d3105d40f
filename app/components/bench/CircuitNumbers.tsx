import { memo } from "react";
import type { StackProps } from "~/components/stack/stackProps";
import { DocumentNumbers } from "./DocumentNumbers";

const numbers = [
  { keys: ["circuit", "seriesResistanceOhmCm2"], quantity: "seriesResistanceOhmCm2", label: "series *R*_{s}" },
  { keys: ["circuit", "shuntResistanceOhmCm2"], quantity: "shuntResistanceOhmCm2", label: "shunt *R*_{sh}" },
  {
    keys: ["circuit", "parallelCapacitanceFPerCm2"],
    quantity: "parallelCapacitanceFPerCm2",
    label: "parallel *C*_{p}",
  },
  { keys: ["circuit", "amplifierBandwidthHz"], quantity: "amplifierBandwidthHz", label: "amplifier bandwidth" },
  { keys: ["circuit", "sourceBandwidthHz"], quantity: "sourceBandwidthHz", label: "light source bandwidth" },
  { keys: ["stack", "temperatureK"], quantity: "temperatureK", label: "*T*, changes *kT* only" },
] as const;

/** What surrounds the cell, and its temperature. */
export const CircuitNumbers = memo(function CircuitNumbers(props: StackProps) {
  return <DocumentNumbers {...props} title="Circuit and temperature" numbers={numbers} />;
});
