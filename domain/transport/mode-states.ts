import type { DepthModes } from './layer-modes.js';

let states = new Float64Array(0);

/** Solutions of v' = -w + alpha, w' = -kappa^2 v + beta for every mode of a layer at one depth: the two homogeneous ones
 *  (even and odd about the middle of the layer) and the answer to the beams that travel down and up.
 *  The even one has v = 1 at both faces; the odd one is scaled so that neither v nor w exceeds 1 there, at any kappa T,
 *  conservative scattering included. The answer to a beam, (exp(-tau) - exp(-kappa tau))/(1 - kappa^2), is written so that
 *  kappa = 1 is no exception.
 *  Shape: six numbers per mode: even v, w; odd v, w; source v, w. The array is reused by the next call.
 *  `depth` and `rest` are scaled optical distances to the faces, `place` the fraction of the layer above,
 *  `down` and `up` the beams' irradiances at the face where each starts. */
export function modeStates(
  modes: DepthModes,
  depth: number,
  rest: number,
  place: number,
  down: number,
  up: number,
): Float64Array {
  if (states.length < 6 * modes.count) states = new Float64Array(6 * modes.count);
  const thickness = modes.opticalThickness;
  const beamTop = Math.exp(-depth);
  const beamBottom = Math.exp(-rest);
  for (let k = 0; k < modes.count; k++) {
    const kappa = modes.kappas[k]!;
    const fromTop = Math.exp(-kappa * depth);
    const fromBottom = Math.exp(-kappa * rest);
    const across = kappa * thickness;
    const whole = Math.exp(-across);
    states[6 * k] = (fromTop + fromBottom) / (1 + whole);
    states[6 * k + 1] = (kappa * (fromTop - fromBottom)) / (1 + whole);
    if (across < 1e-8) {
      // the hyperbolic sine is linear
      const scale = 1 / (thickness + 2);
      states[6 * k + 2] = (2 * place - 1) * thickness * scale;
      states[6 * k + 3] = -2 * scale;
    } else {
      const scale = 1 / (-Math.expm1(-across) + kappa * (1 + whole));
      states[6 * k + 2] = (fromBottom - fromTop) * scale;
      states[6 * k + 3] = -kappa * (fromBottom + fromTop) * scale;
    }
    const alpha = modes.alphas[k]!;
    const strength = alpha + modes.betas[k]!;
    const answerTop = beamAnswer(kappa, depth, beamTop, fromTop);
    const slopeTop = -kappa * answerTop - beamTop / (1 + kappa);
    let v = -strength * down * answerTop;
    let w = down * (alpha * beamTop + strength * slopeTop);
    if (up > 0) {
      const answerBottom = beamAnswer(kappa, rest, beamBottom, fromBottom);
      const slopeBottom = -kappa * answerBottom - beamBottom / (1 + kappa);
      v -= strength * up * answerBottom;
      w -= up * (alpha * beamBottom + strength * slopeBottom);
    }
    states[6 * k + 4] = v;
    states[6 * k + 5] = w;
  }
  return states;
}

function beamAnswer(kappa: number, distance: number, beam: number, mode: number): number {
  const excess = (kappa - 1) * distance;
  if (Math.abs(excess) > 0.1) return (beam - mode) / (1 - kappa * kappa);
  if (Math.abs(excess) < 1e-5) return (-distance * beam * (1 - excess / 2)) / (1 + kappa);
  return (beam * Math.expm1(-excess)) / ((kappa - 1) * (1 + kappa));
}
