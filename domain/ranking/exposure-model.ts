import type { Pulse } from '../beam/pulse.js';
import type { Remarks } from '../quantities/caution.js';
import { DomainError } from '../quantities/errors.js';
import type { ReferenceData } from '../reference/reference-data.js';
import { prepareTarget } from '../targets/index.js';
import { materialOf, type PreparedTarget, type Target } from '../targets/target.js';
import { type HeatGrid, makeHeatGrid } from '../thermal/heat-grid.js';
import { HeatModes } from '../thermal/heat-modes.js';
import type { Cooling } from '../thermal/surface-cooling.js';
import type { DamagePair } from '../thermal/thermal-figures.js';
import type { ResolvedSkin } from '../tissue/skin.js';
import { solveLight } from '../transport/layered-solver.js';

/** Pulses given on one place: one, or a train. */
export interface Train {
  readonly repetitionRateHz: number;
  readonly pulseCount: number;
}

/** A skin with its target and cooling, and everything about it that depends on neither wavelength, pulse nor spot: the heat grid,
 *  the places looked at, and the eigenmodes that every pulse shares. */
export interface ExposureModel {
  readonly skin: ResolvedSkin;
  readonly target: PreparedTarget;
  readonly cooling: Cooling | undefined;
  readonly reference: ReferenceData;
  readonly remarks: Remarks;
  readonly grid: HeatGrid;
  readonly modes: HeatModes;
  /** Depths at which temperatures are followed, in this order: surface, basal layer, target center. */
  readonly placesUm: readonly [number, number, number];
  readonly epidermisPair: DamagePair;
  /** Solves light; a store of solved fields may stand in for the solver. */
  readonly solve: typeof solveLight;
}

export const surfacePlace = 0;
export const basalPlace = 1;
export const targetPlace = 2;

const fatThicknessUm = 6000; // subcutaneous fat of the seven-layer skin model of Dremin2019, table 1

/** Prepares a skin, target and cooling. Throws: out-of-range, unknown-reference. */
export function makeExposureModel(options: {
  readonly skin: ResolvedSkin;
  readonly target: Target;
  readonly cooling?: Cooling | undefined;
  readonly reference: ReferenceData;
  readonly remarks: Remarks;
  readonly solve?: typeof solveLight | undefined;
}): ExposureModel {
  const { skin, reference, remarks } = options;
  const target = prepareTarget(options.target, { skin, reference, remarks });
  const pair = reference.thermal.damagePairs.get('epidermis-henriques');
  if (!pair) throw new DomainError('unknown-reference', "no damage pair 'epidermis-henriques' in the reference data");
  remarks.assume({ name: 'epidermisDamagePair', value: pair.id, source: pair.source, status: pair.status });
  const grid = makeHeatGrid([
    { thicknessUm: skin.epidermisThicknessUm, material: materialOf(reference, 'epidermis') },
    { thicknessUm: skin.dermisThicknessUm, material: materialOf(reference, 'dermis') },
    { thicknessUm: fatThicknessUm, material: materialOf(reference, 'fat') },
  ]);
  return {
    skin,
    target,
    cooling: options.cooling,
    reference,
    remarks,
    grid,
    modes: new HeatModes(),
    placesUm: [0, skin.epidermisThicknessUm, target.depthUm],
    epidermisPair: pair,
    solve: options.solve ?? solveLight,
  };
}

/** A rectangular pulse of a duration. */
export function singlePulse(durationS: number): Pulse {
  return { durationS };
}
