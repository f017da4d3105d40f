import { memo } from "react";
import { NumberGroup } from "~/components/stack/NumberGroup";
import type { StackProps } from "~/components/stack/stackProps";
import { DocumentNumber } from "./DocumentNumber";

/** What surrounds the cell, and its temperature. */
export const CircuitNumbers = memo(function CircuitNumbers(props: StackProps) {
  return (
    <NumberGroup title="Circuit and temperature">
      <DocumentNumber
        {...props}
        keys={["circuit", "seriesResistanceOhmCm2"]}
        quantity="seriesResistanceOhmCm2"
        label="series *R*_{s}"
      />
      <DocumentNumber
        {...props}
        keys={["circuit", "shuntResistanceOhmCm2"]}
        quantity="shuntResistanceOhmCm2"
        label="shunt *R*_{sh}"
      />
      <DocumentNumber
        {...props}
        keys={["circuit", "parallelCapacitanceFPerCm2"]}
        quantity="parallelCapacitanceFPerCm2"
        label="parallel *C*_{p}"
      />
      <DocumentNumber
        {...props}
        keys={["circuit", "amplifierBandwidthHz"]}
        quantity="amplifierBandwidthHz"
        label="amplifier bandwidth"
      />
      <DocumentNumber
        {...props}
        keys={["circuit", "sourceBandwidthHz"]}
        quantity="sourceBandwidthHz"
        label="light source bandwidth"
      />
      <DocumentNumber
        {...props}
        keys={["stack", "temperatureK"]}
        quantity="temperatureK"
        label="*T*, changes *kT* only"
      />
    </NumberGroup>
  );
});
