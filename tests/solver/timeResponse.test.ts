import { describe, expect, test } from "vitest";
import { choppedReading, pulseResponse, stepResponse, timeModel } from "../../solver/src/analysis/timeResponse.ts";
import { constant, diffusion, logarithmic, relaxation, sampled, sum } from "./spectra.ts";

const hz = (tau: number) => 1 / (2 * Math.PI * tau);

describe("time response", () => {
  const tau = 1e-3;
  const model = timeModel(sampled(logarithmic(1, 1e5, 8), sum(relaxation(hz(tau), 0.8), constant(0.1))));

  test("a step through one relaxation is an exact exponential", () => {
    const times = [0, 1e-4, 1e-3, 5e-3];
    stepResponse(model, times).forEach((value, k) => {
      expect(value).toBeCloseTo(0.1 + 0.8 * (1 - Math.exp(-times[k] / tau)), 9);
    });
    expect(stepResponse(model, [-1])).toEqual([0]);
  });

  test("a pulse rises and decays with the same time constant", () => {
    const [during, after] = pulseResponse(model, [1e-3, 3e-3], 2e-3);
    expect(during).toBeCloseTo(0.1 + 0.8 * (1 - Math.exp(-1)), 9);
    expect(after).toBeCloseTo(0.8 * (Math.exp(-1) - Math.exp(-3)), 9);
  });

  test("a diffusion film answers a step with Σ 2/λ²·(1 − e^{−λ²t}), λ = (n + ½)π", () => {
    // H. S. Carslaw, J. C. Jaeger, Conduction of Heat in Solids, 2nd ed., § 3.4 (from memory)
    const film = timeModel(sampled(logarithmic(1e-3, 1e5, 10), diffusion(1)));
    const exact = (time: number) => {
      let total = 0;
      for (let n = 0; n < 2000; n++) {
        const square = ((n + 0.5) * Math.PI) ** 2;
        total += (2 / square) * (1 - Math.exp(-square * time));
      }
      return total;
    };
    const times = [0.01, 0.1, 0.5, 2];
    stepResponse(film, times).forEach((value, k) => {
      expect(Math.abs(value - exact(times[k]))).toBeLessThan(2e-3);
    });
  });
});

describe("chopped light", () => {
  test("a flat response reads √2/π of a square wave 0…1, the fundamental's peak is 2/π", () => {
    // Fourier series of the square wave: 0.450158158079 and 0.636619772368
    const reading = choppedReading(timeModel(sampled(logarithmic(1, 1e5, 8), constant(1))), 100);
    expect(reading.rms).toBeCloseTo(0.450158158079, 9);
    expect(reading.amplitude).toBeCloseTo(0.636619772368, 9);
    expect(1 / reading.rms).toBeCloseTo(2.22144146908, 8);
    expect(reading.peakToPeak).toBeCloseTo(1, 9);
  });

  test("through 1/(1 + iωτ) at ωτ = 0.5: in phase 0.3601265265, quadrature −0.1800632632", () => {
    const tau = 1e-3;
    const model = timeModel(sampled(logarithmic(1, 1e5, 8), relaxation(hz(tau))));
    const reading = choppedReading(model, 0.5 / (2 * Math.PI * tau));
    expect(reading.inPhase).toBeCloseTo(0.3601265265, 8);
    expect(reading.quadrature).toBeCloseTo(-0.1800632632, 8);
    // periodic exponentials: from 1/(1 + e^{T/2τ}) to 1/(1 + e^{−T/2τ})
    const half = Math.exp((2 * Math.PI) / 0.5 / 2);
    expect(reading.peakToPeak).toBeCloseTo(1 / (1 + 1 / half) - 1 / (1 + half), 3);
  });
});
