/** Random stacks that a document may hold, the same for the same seed: what the robustness walk solves. */
import type { LayerDocument, ScenarioDocument } from "@demilune/solver";

/** Uniform numbers in [0, 1) from a seed (mulberry32, public domain). */
export function randomNumbers(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), state | 1);
    t = (t + Math.imul(t ^ (t >>> 7), t | 61)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

class Draw {
  private readonly next: () => number;
  constructor(seed: number) {
    this.next = randomNumbers(seed);
    for (let k = 0; k < 5; k++) this.next();
  }
  between(low: number, high: number): number {
    return low + (high - low) * this.next();
  }
  decades(low: number, high: number): number {
    return Number((10 ** this.between(Math.log10(low), Math.log10(high))).toPrecision(4));
  }
  chance(probability: number): boolean {
    return this.next() < probability;
  }
  pick<T>(list: readonly T[]): T {
    return list[Math.floor(this.next() * list.length)];
  }
}

const rounded = (value: number) => Number(value.toFixed(3));

/** A layer of arbitrary but plausible material. */
function layer(draw: Draw, affinity: number, gap: number, role: "donor" | "acceptor" | "absorber"): LayerDocument {
  const absorber = role === "absorber";
  const result: LayerDocument = {
    thicknessNm: absorber ? draw.decades(80, 3000) : draw.decades(8, 250),
    relativePermittivity: rounded(draw.between(3, 30)),
    affinityEV: rounded(affinity),
    gapEV: rounded(gap),
    conductionStatesPerCm3: draw.decades(1e18, 2e20),
    valenceStatesPerCm3: draw.decades(1e18, 2e20),
    electronMobilityCm2PerVs: draw.decades(absorber ? 1e-3 : 1e-4, 100),
    holeMobilityCm2PerVs: draw.decades(absorber ? 1e-3 : 1e-4, 100),
  };
  if (role === "donor" || (absorber && draw.chance(0.25)))
    result.donorsPerCm3 = draw.decades(1e14, absorber ? 1e17 : 1e19);
  if (role === "acceptor" || (absorber && draw.chance(0.25)))
    result.acceptorsPerCm3 = draw.decades(1e14, absorber ? 1e17 : 1e19);
  if (absorber || draw.chance(0.15)) result.absorptionPerCm = draw.decades(1e3, 3e5);
  const recombination: LayerDocument["recombination"] = {};
  if (draw.chance(absorber ? 0.85 : 0.5)) {
    recombination.electronLifetimeNs = draw.decades(0.1, 1e5);
    recombination.holeLifetimeNs = draw.decades(0.1, 1e5);
    if (draw.chance(0.3)) recombination.trapDepthEV = rounded(draw.between(0.1, 0.9) * gap);
    if (draw.chance(absorber ? 0.15 : 0.05))
      result.traps = { densityPerCm3: draw.decades(1e13, 1e17), kind: draw.pick(["acceptor", "donor"] as const) };
  }
  if (draw.chance(absorber ? 0.6 : 0.2)) recombination.radiativeCm3PerS = draw.decades(1e-14, 1e-9);
  if (draw.chance(0.15)) {
    recombination.augerElectronCm6PerS = draw.decades(1e-31, 1e-27);
    recombination.augerHoleCm6PerS = draw.decades(1e-31, 1e-27);
  }
  result.recombination = recombination;
  return result;
}

/** Between one and six layers: n or p side, absorbers, the other side; ions, traps, interfaces, contacts at random. */
export function randomScenario(seed: number): ScenarioDocument {
  const draw = new Draw(seed);
  const gap = draw.between(0.9, 2.2);
  const affinity = draw.between(3.6, 4.4);
  const layers: LayerDocument[] = [];
  const family = draw.pick(["selective", "selective", "selective", "homojunction", "single", "wide"] as const);
  if (family === "homojunction") {
    const shared = layer(draw, affinity, gap, "absorber");
    layers.push({
      ...shared,
      thicknessNm: draw.decades(20, 1000),
      donorsPerCm3: draw.decades(1e15, 2e19),
      acceptorsPerCm3: 0,
    });
    if (draw.chance(0.5)) layers.push({ ...shared, donorsPerCm3: 0, acceptorsPerCm3: 0 });
    layers.push({
      ...shared,
      thicknessNm: draw.decades(100, 200_000),
      acceptorsPerCm3: draw.decades(1e14, 2e18),
      donorsPerCm3: 0,
    });
  } else if (family === "single") layers.push(layer(draw, affinity, gap, "absorber"));
  else {
    const count = family === "wide" ? draw.pick([2, 3]) : 1;
    layers.push(layer(draw, affinity + draw.between(-0.3, 0.3), gap + draw.between(0, 1.6), "donor"));
    for (let k = 0; k < count; k++)
      layers.push(
        layer(draw, affinity + (k ? draw.between(-0.2, 0.2) : 0), gap + (k ? draw.between(-0.2, 0.2) : 0), "absorber"),
      );
    const wider = draw.between(0, 1.4);
    layers.push(layer(draw, affinity - wider, gap + wider + draw.between(-0.3, 0.3), "acceptor"));
    if (family === "wide" && draw.chance(0.5)) layers.push(layer(draw, affinity - wider, gap + wider, "acceptor"));
  }
  if (draw.chance(0.45)) {
    const first = layers.findIndex((each) => (each.absorptionPerCm ?? 0) > 0);
    const last = draw.chance(0.3) ? Math.min(first + 1, layers.length - 1) : first;
    for (let k = first; k <= last; k++) {
      layers[k].ions = { cationsPerCm3: draw.decades(1e15, 3e19), cationMobilityCm2PerVs: draw.decades(1e-13, 1e-7) };
      if (draw.chance(0.3))
        Object.assign(layers[k].ions!, {
          anionsPerCm3: draw.decades(1e15, 1e19),
          anionMobilityCm2PerVs: draw.decades(1e-13, 1e-7),
        });
    }
  }
  const electronsInFront = draw.chance(0.5);
  if (!electronsInFront) layers.reverse();
  const edge = (electrons: boolean) => {
    const next = electrons === electronsInFront ? layers[0] : layers[layers.length - 1];
    const contact: NonNullable<ScenarioDocument["stack"]["front"]> = {};
    if (draw.chance(0.4))
      contact.workFunctionEV = rounded(
        electrons
          ? next.affinityEV + draw.between(0.02, 0.45)
          : next.affinityEV + next.gapEV - draw.between(0.02, 0.45),
      );
    if (draw.chance(0.3)) contact[electrons ? "holeVelocityCmPerS" : "electronVelocityCmPerS"] = draw.decades(1, 1e6);
    return contact;
  };
  const electronEdge = edge(true);
  const holeEdge = edge(false);
  const interfaces = layers.flatMap((_, k) =>
    k < layers.length - 1 && draw.chance(0.3)
      ? [{ afterLayer: k, electronVelocityCmPerS: draw.decades(1, 1e5), holeVelocityCmPerS: draw.decades(1, 1e5) }]
      : [],
  );
  const flux = draw.chance(0.1) ? 0 : draw.decades(1e10, 1e18);
  const document: ScenarioDocument = {
    format: "demilune.scenario/1",
    name: `random ${seed}`,
    stack: {
      temperatureK: draw.chance(0.2) ? Math.round(draw.between(150, 450)) : 300,
      electronContact: electronsInFront ? "front" : "back",
      front: electronsInFront ? electronEdge : holeEdge,
      back: electronsInFront ? holeEdge : electronEdge,
      layers,
      interfaces,
    },
    light: {
      side: draw.pick(["front", "back"] as const),
      fluxPerCm2S: flux,
      backMirrorReflectance: draw.chance(0.2) ? 0.8 : 0,
    },
    circuit: {
      seriesResistanceOhmCm2: draw.chance(0.5) ? draw.decades(0.1, 100) : 0,
      shuntResistanceOhmCm2: draw.chance(0.3) ? draw.decades(100, 1e6) : null,
    },
    spectra: [
      { technique: "imps", bias: "shortCircuit" },
      { technique: "imvs", bias: "openCircuit" },
      { technique: "impedance", bias: { voltageV: rounded(draw.between(-3, 0.8 * gap)) } },
    ],
    frequencies: { fromHz: 0.01, toHz: 1e9, pointsPerDecade: 1 },
  };
  if (layers.some((each) => each.ions) && draw.chance(0.2))
    document.stack.ionsFrozenAt = {
      bias: draw.chance(0.5) ? "shortCircuit" : { voltageV: rounded(draw.between(-0.5, 1)) },
    };
  return document;
}
