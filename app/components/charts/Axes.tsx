import { AxisBottom, AxisLeft, type TickRendererProps } from "@visx/axis";
import type { PlotScale } from "./geometry";
import { SvgText } from "./SvgText";
import type { Ticks } from "./ticks";

interface AxesProps {
  xScale: PlotScale;
  yScale: PlotScale;
  xTicks: Ticks;
  yTicks: Ticks;
  height: number;
}

const inwards = -4;

function BottomTick({ x, formattedValue }: TickRendererProps) {
  return formattedValue ? (
    <SvgText className="fill-ink-soft" x={x} y={17} textAnchor="middle" text={formattedValue} />
  ) : null;
}

function LeftTick({ y, formattedValue }: TickRendererProps) {
  return formattedValue ? (
    <SvgText className="fill-ink-soft" x={-7} y={y + 4.5} textAnchor="end" text={formattedValue} />
  ) : null;
}

const axisStyle = { stroke: "var(--rule)", tickStroke: "var(--rule)", tickLength: inwards } as const;

/** Left and bottom axis only, ticks inwards, labels outside. */
export function Axes({ xScale, yScale, xTicks, yTicks, height }: AxesProps) {
  return (
    <>
      <AxisBottom
        {...axisStyle}
        scale={xScale}
        top={height}
        tickValues={xTicks.values}
        tickFormat={(_, index) => xTicks.labels[index]}
        tickComponent={BottomTick}
      />
      <AxisLeft
        {...axisStyle}
        scale={yScale}
        tickValues={yTicks.values}
        tickFormat={(_, index) => yTicks.labels[index]}
        tickComponent={LeftTick}
        tickLabelProps={{ dy: 0 }}
      />
    </>
  );
}
