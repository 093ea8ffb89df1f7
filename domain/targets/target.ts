import type { Remarks } from '../quantities/caution.js';
import { assertWithin, DomainError } from '../quantities/errors.js';
import type { ReferenceData } from '../reference/reference-data.js';
import type { DamagePair, ThermalMaterial } from '../thermal/thermal-figures.js';
import type { ResolvedSkin } from '../tissue/skin.js';

/** What is to be heated. Sizes are full diameters, depths are from the skin surface to the center of the target. */
export type Target =
  | { readonly kind: 'vessel'; readonly diameterUm: number; readonly depthMm: number }
  | {
      readonly kind: 'hair-follicle';
      readonly shaftDiameterUm: number;
      readonly follicleDiameterUm: number;
      readonly depthMm: number;
      readonly melaninFraction?: number;
    }
  | { readonly kind: 'epidermal-pigment'; readonly melanosomeFraction?: number }
  | {
      readonly kind: 'dermal-pigment';
      readonly granuleDiameterUm: number;
      readonly depthMm: number;
      readonly chromophoreId: string;
    }
  | { readonly kind: 'sebaceous-gland'; readonly diameterUm: number; readonly depthMm: number }
  | { readonly kind: 'water-layer'; readonly depthMm: number };

export type TargetKind = Target['kind'];

/** A body inside the skin that absorbs more than its surroundings and is followed by its own radial heat solution. */
export interface Inclusion {
  readonly geometry: 'cylinder' | 'sphere';
  /** Radius in which light is absorbed. */
  readonly heaterRadiusUm: number;
  /** Radius at which the effect is judged: the vessel's wall, the follicle's edge. */
  readonly effectRadiusUm: number;
  readonly heater: ThermalMaterial;
  readonly surroundings: ThermalMaterial;
}

/** How an effect is recognized: an Arrhenius integral of 1, or a granule that reaches the temperature of explosive vaporization. */
export type Effect =
  | { readonly by: 'damage'; readonly pair: DamagePair }
  | { readonly by: 'vaporization'; readonly temperatureC: number }
  /** Whichever comes first: granules vaporize (short pulses) or the layer that holds them coagulates (long pulses). */
  | { readonly by: 'either'; readonly pair: DamagePair; readonly temperatureC: number };

/** A target ready for light and heat, everything that does not depend on wavelength or pulse. */
export interface PreparedTarget {
  readonly kind: TargetKind;
  readonly depthUm: number;
  readonly relaxationTimeS: number;
  /** null when the target is the tissue of its layer itself. */
  readonly inclusion: Inclusion | null;
  readonly effect: Effect;
  /** Melanosomes that vaporize in the epidermis are harm, save where they are the target. */
  readonly melanosomesAreTarget: boolean;
  /** Melanosome fraction of the epidermis where the target is, when it differs from the surrounding skin's. */
  readonly lesionMelanosomeFraction?: number;
  /** Power absorbed per volume of the heater over the fluence rate around it, 1/cm, flattening included; null without inclusion. */
  heaterAbsorptionPerCm(wavelengthNm: number): number | null;
  /** Why no fluence can work, for a target with nothing that absorbs. */
  readonly noTarget?: string;
}

export interface TargetContext {
  readonly skin: ResolvedSkin;
  readonly reference: ReferenceData;
  readonly remarks: Remarks;
}

/** One entry of the list of targets: what it is, where it holds, and how it is prepared. */
export interface TargetDefinition<K extends TargetKind = TargetKind> {
  readonly kind: K;
  readonly shape: 'plane' | 'cylinder' | 'sphere';
  readonly sizeRangeUm: readonly [number, number] | null;
  readonly depthRangeMm: readonly [number, number] | null;
  readonly chromophores: readonly string[];
  readonly effectText: string;
  readonly harmText: string;
  readonly sources: readonly string[];
  prepare(target: Extract<Target, { kind: K }>, context: TargetContext): PreparedTarget;
}

/** Declares a target. */
export function defineTarget<K extends TargetKind>(definition: TargetDefinition<K>): TargetDefinition<K> {
  return definition;
}

/** Refuses sizes and depths outside the range in which the target's model holds. Throws: out-of-range. */
export function assertTargetRange(
  definition: Pick<TargetDefinition, 'kind' | 'sizeRangeUm' | 'depthRangeMm'>,
  sizeUm: number | null,
  depthMm: number | null,
): void {
  if (sizeUm !== null && definition.sizeRangeUm) assertWithin(`${definition.kind} size in um`, sizeUm, ...definition.sizeRangeUm);
  if (depthMm !== null && definition.depthRangeMm)
    assertWithin(`${definition.kind} depth in mm`, depthMm, ...definition.depthRangeMm);
}

/** A thermal material by id. Throws: unknown-reference. */
export function materialOf(reference: ReferenceData, id: string): ThermalMaterial {
  const material = reference.thermal.materials.get(id);
  if (!material) throw new DomainError('unknown-reference', `no thermal material '${id}' in the reference data`, { id });
  return material;
}

/** A damage pair by id; the choice is written into the assumptions. Throws: unknown-reference. */
export function damagePairOf({ reference, remarks }: TargetContext, id: string, role: string): DamagePair {
  const pair = reference.thermal.damagePairs.get(id);
  if (!pair) throw new DomainError('unknown-reference', `no damage pair '${id}' in the reference data`, { id });
  remarks.assume({ name: `${role}DamagePair`, value: pair.id, source: pair.source, status: pair.status });
  return pair;
}
