/**
 * The answer in time to a light step, a light pulse or chopped light, from a spectrum of `Q` or `W` alone.
 *
 * With f(s) = c + Σ r_k/(s − p_k) (rational approximation of the spectrum) the response to a unit step is
 * c + Σ (r_k/p_k)(e^{p_k t} − 1), a rectangular pulse is two steps, and the periodic answer to light that is on for the
 * first half of a period T and off for the second follows mode by mode: with S_k = −r_k/p_k,
 * S_k(1 − e^{p_k t}/(1 + e^{p_k T/2})) while on, S_k e^{p_k t'}/(1 + e^{p_k T/2}) while off.
 *
 * A lock-in amplifier with a sinusoidal reference reads the fundamental of a square wave 0…1, whose peak is 2/π and whose
 * root mean square is √2/π (Fourier series of the square wave).
 */

import { add, type Complex, complex, divide, modulus, multiply, scale, subtract } from "../numerics/complex.ts";
import { evaluate, fitRational, poles, residue } from "./aaa.ts";
import type { Curve } from "./arcs.ts";

/** One pole, or one of a conjugate pair; the conjugate is understood. */
interface Mode {
  /** 1/s. */
  pole: Complex;
  /** −residue/pole: value at zero frequency. */
  strength: Complex;
  /** 1 for a real pole, 2 for a pair. */
  multiplicity: 1 | 2;
}

export interface TimeModel {
  modes: Mode[];
  /** Instantaneous part, unit of the spectrum. */
  constant: number;
  /** Largest distance between spectrum and model over the points, relative to the largest modulus. */
  deviation: number;
  /** The spectrum between and beyond its points, frequency in Hz. */
  at(frequencyHz: number): Complex;
}

const exponential = (exponent: Complex): Complex =>
  scale(complex(Math.cos(exponent.im), Math.sin(exponent.im)), Math.exp(exponent.re));

/** Modes weaker than this share of the largest modulus are arithmetic. */
const leastMode = 1e-9;

/**
 * The modes of a spectrum that is free of noise, as the solver computes it.
 * @param curve frequencies in Hz, ascending and distinct, at least four points
 */
export function timeModel({ frequencyHz, re, im }: Curve): TimeModel {
  const unit = 2 * Math.PI * Math.sqrt(frequencyHz[0] * frequencyHz[frequencyHz.length - 1]);
  const omega = frequencyHz.map((frequency) => (2 * Math.PI * frequency) / unit);
  const largest = Math.max(...re.map((value, k) => Math.hypot(value, im[k])));
  const form = fitRational({ omega, re, im }, 1e-10 * largest, Math.max(1, Math.floor(frequencyHz.length / 3)));
  const modes = poles(form).flatMap((pole): Mode[] => {
    if (pole.im < 0 || pole.re >= 0) return [];
    const strength = scale(divide(residue(form, pole), pole), -1);
    if (modulus(strength) < leastMode * largest) return [];
    return [{ pole: scale(pole, unit), strength, multiplicity: pole.im === 0 ? 1 : 2 }];
  });
  const rest = omega.map((w, k) => subtract(complex(re[k], im[k]), modalSum(modes, complex(0, w * unit))));
  const constant = rest.reduce((sum, value) => sum + value.re, 0) / rest.length;
  const deviation = Math.max(...rest.map((value) => Math.hypot(value.re - constant, value.im))) / (largest || 1);
  return {
    modes,
    constant,
    deviation,
    at: (frequency) => evaluate(form, complex(0, (2 * Math.PI * frequency) / unit)),
  };
}

/** Σ S_k/(1 − s/p_k), conjugates included. */
function modalSum(modes: readonly Mode[], s: Complex): Complex {
  return modes.reduce((sum, { pole, strength, multiplicity }) => {
    const part = (p: Complex, amount: Complex) => divide(amount, subtract(complex(1), divide(s, p)));
    const own = add(sum, part(pole, strength));
    return multiplicity === 1 ? own : add(own, part(complex(pole.re, -pole.im), complex(strength.re, -strength.im)));
  }, complex(0));
}

/** Response to light switched on at t = 0 by one unit; 0 before. Times in s. */
export function stepResponse({ modes, constant }: TimeModel, timesS: readonly number[]): number[] {
  return timesS.map((time) =>
    time < 0
      ? 0
      : modes.reduce(
          (sum, { pole, strength, multiplicity }) =>
            sum + multiplicity * multiply(strength, subtract(complex(1), exponential(scale(pole, time)))).re,
          constant,
        ),
  );
}

/** Response to a rectangular light pulse of one unit from t = 0 to its duration. Times in s. */
export function pulseResponse(model: TimeModel, timesS: readonly number[], durationS: number): number[] {
  const off = stepResponse(
    model,
    timesS.map((time) => time - durationS),
  );
  return stepResponse(model, timesS).map((value, k) => value - off[k]);
}

export interface ChoppedReading {
  /** Root mean square of the fundamental in phase with the light, and 90° behind it (negative when it lags). */
  inPhase: number;
  quadrature: number;
  /** Peak of the fundamental, and its root mean square. */
  amplitude: number;
  rms: number;
  /** Highest less lowest value of the waveform. */
  peakToPeak: number;
  /** One period of the waveform, light on during the first half. */
  waveform: { timeS: number[]; value: number[] };
}

/** What a chopped measurement reads: light on and off for half a period each, of unit height. */
export function choppedReading(model: TimeModel, chopperHz: number, points = 200): ChoppedReading {
  const period = 1 / chopperHz;
  const timeS = Array.from({ length: points }, (_, k) => (k * period) / points);
  const value = timeS.map((time) => {
    const on = time < period / 2;
    const since = on ? time : time - period / 2;
    return model.modes.reduce(
      (sum, { pole, strength, multiplicity }) => {
        const half = add(complex(1), exponential(scale(pole, period / 2)));
        const decay = divide(exponential(scale(pole, since)), half);
        return sum + multiplicity * multiply(strength, on ? subtract(complex(1), decay) : decay).re;
      },
      on ? model.constant : 0,
    );
  });
  const response = model.at(chopperHz);
  const rms = Math.SQRT2 / Math.PI;
  return {
    inPhase: rms * response.re,
    quadrature: rms * response.im,
    amplitude: (2 / Math.PI) * modulus(response),
    rms: rms * modulus(response),
    peakToPeak: Math.max(...value) - Math.min(...value),
    waveform: { timeS, value },
  };
}
