import type { Remarks } from '../quantities/caution.js';
import { assertWithin, DomainError } from '../quantities/errors.js';
import type { PulseTrain } from './emission.js';
import type { CoolingFigure, ThermalFigures } from './thermal-figures.js';

export type CoolingKind = 'none' | 'contact' | 'cryogen-spray' | 'chilled-air';

/** Cooling as asked for. `preS` and `postS` are how long it acts before and after the emission; a cryogen spray instead has
 *  a spurt of `spurtS` that ends `delayS` before the emission, and `postS` is how long its film stays on the skin after the spurt. */
export interface Cooling {
  readonly kind: CoolingKind;
  readonly temperatureC?: number | undefined;
  readonly heatTransferWPerM2K?: number | undefined;
  readonly preS?: number | undefined;
  readonly postS?: number | undefined;
  readonly delayS?: number | undefined;
  readonly spurtS?: number | undefined;
}

/** How the surface loses heat during [fromS, toS): to a medium at `temperatureC` through a heat transfer coefficient.
 *  Phases follow each other without gap; time 0 is the start of the emission, the last phase ends at Infinity. */
export interface SurfacePhase {
  readonly fromS: number;
  readonly toS: number;
  readonly heatTransferWPerM2K: number;
  readonly temperatureC: number;
}

/** Skin before any cooling. Heat lost to the air is replaced from the core, so that this state would last. */
export interface SkinAtRest {
  readonly surfaceC: number;
  readonly coreC: number;
  readonly heatTransferWPerM2K: number;
  readonly airC: number;
}

/** Skin of a person at ease in a room: neutral surface and core temperature of the two-node model of the body, and the combined
 *  coefficient of free convection and radiation that open models of skin use.
 *  @source GaggeStolwijkNishi1971 (from memory); still-air row of the cooling figures */
export const skinAtRest: SkinAtRest = { surfaceC: 34, coreC: 37, heatTransferWPerM2K: 10, airC: 23 };

interface DefaultTimes {
  readonly preS: number;
  readonly postS: number;
}

// Common practice, no source: a window rests on the skin for about a second in all, air blows on the spot for seconds.
const windowTimes: DefaultTimes = { preS: 0.5, postS: 0.5 };
const airTimes: DefaultTimes = { preS: 2, postS: 2 };
const usualSpurtS = 0.03; // common practice, no source: spurts of 20 to 60 ms
const usualDelayS = 0.02; // common practice, no source: delays of 10 to 40 ms
// The liquid left by a spurt goes on evaporating for a few times as long as the spurt; the shorter end keeps less cold in reserve.
const filmPerSpurt = 3;

/** The phases of surface cooling from before the pulse to the end of time; what the request leaves open is filled in and named.
 *  Contact and air act through a whole train; a spray is given before each of its pulses, where the last one's film has not gone
 *  before the next spurt it acts without a break.
 *  Throws: out-of-range, unknown-reference (a figure is missing). */
export function coolingPhases(
  cooling: Cooling | undefined,
  emissionEndS: number,
  figures: ThermalFigures,
  remarks: Remarks,
  train?: PulseTrain,
): SurfacePhase[] {
  const air = stillAir(figures, remarks);
  if (cooling === undefined || cooling.kind === 'none') return [{ fromS: 0, toS: Number.POSITIVE_INFINITY, ...air }];
  const active = activeExchange(cooling, figures, remarks);
  const [firstFromS, firstToS] = activeSpan(cooling, emissionEndS, remarks);
  const phases: SurfacePhase[] = [{ fromS: firstFromS, toS: firstToS, ...active }];
  for (const shiftS of cooling.kind === 'cryogen-spray' ? laterSpurtsS(train, remarks) : []) {
    const last = phases[phases.length - 1]!;
    const fromS = firstFromS + shiftS;
    const toS = firstToS + shiftS;
    if (fromS <= last.toS) phases[phases.length - 1] = { ...last, toS };
    else phases.push({ fromS: last.toS, toS: fromS, ...air }, { fromS, toS, ...active });
  }
  phases.push({ fromS: phases[phases.length - 1]!.toS, toS: Number.POSITIVE_INFINITY, ...air });
  return phases;
}

const mostSpurts = 50;

// When the spurts after the first come, relative to it.
function laterSpurtsS(train: PulseTrain | undefined, remarks: Remarks): number[] {
  if (train === undefined || train.pulseCount < 2) return [];
  const isFew = train.pulseCount <= mostSpurts;
  const spurts = isFew ? train.pulseCount : 1;
  remarks.assume({
    name: 'cooling.spurts',
    value: spurts,
    source: 'a spurt before each pulse: common practice',
    status: 'convention',
  });
  if (isFew) return Array.from({ length: spurts - 1 }, (_, i) => (i + 1) / train.repetitionRateHz);
  remarks.caution(
    'one-spurt',
    `In trains of more than ${mostSpurts} pulses a spurt is counted before the first pulse alone; this one has ${train.pulseCount}.`,
  );
  return [];
}

/** Warns when cooling takes the skin below the freezing point of water. */
export function cautionIfFreezing(coldestSurfaceC: number, remarks: Remarks): void {
  if (coldestSurfaceC >= 0) return;
  remarks.caution(
    'skin-below-freezing',
    `Cooling takes the skin surface down to ${coldestSurfaceC.toFixed(1)} C. Frost and cold injury are possible, more so in dark skin; shorten the spurt or the contact.`,
  );
}

type Exchange = Pick<SurfacePhase, 'heatTransferWPerM2K' | 'temperatureC'>;

function stillAir(figures: ThermalFigures, remarks: Remarks): Exchange {
  const { source, status, heatTransferWPerM2K } = figureOf('still-air', figures);
  remarks.assume({
    name: 'skinSurfaceAtRestC',
    value: skinAtRest.surfaceC,
    unit: 'C',
    source: 'GaggeStolwijkNishi1971',
    status: 'from-memory',
  });
  remarks.assume({ name: 'stillAirHeatTransferWPerM2K', value: heatTransferWPerM2K, unit: 'W/(m2 K)', source, status });
  return { heatTransferWPerM2K, temperatureC: skinAtRest.airC };
}

function activeExchange(cooling: Cooling, figures: ThermalFigures, remarks: Remarks): Exchange {
  const figure = figureOf(cooling.kind, figures);
  const { source, status } = figure;
  if (cooling.heatTransferWPerM2K === undefined) {
    remarks.assume({ name: 'cooling.heatTransferWPerM2K', value: figure.heatTransferWPerM2K, unit: 'W/(m2 K)', source, status });
  }
  if (cooling.temperatureC === undefined) {
    remarks.assume({ name: 'cooling.temperatureC', value: figure.temperatureC, unit: 'C', source, status });
  }
  const { heatTransferWPerM2K = figure.heatTransferWPerM2K, temperatureC = figure.temperatureC } = cooling;
  assertWithin('cooling.heatTransferWPerM2K', heatTransferWPerM2K, 0, 1e6);
  assertWithin('cooling.temperatureC', temperatureC, -200, 60);
  return { heatTransferWPerM2K, temperatureC };
}

// Start and end of active cooling. A film of cryogen acts from the start of the spurt until it has evaporated.
function activeSpan(cooling: Cooling, emissionEndS: number, remarks: Remarks): [fromS: number, toS: number] {
  const given = (name: 'preS' | 'postS' | 'spurtS' | 'delayS', usual: number): number => {
    const value = cooling[name];
    if (value === undefined) {
      remarks.assume({ name: `cooling.${name}`, value: usual, unit: 's', source: 'common practice', status: 'convention' });
      return usual;
    }
    assertWithin(`cooling.${name}`, value, 0, 600);
    return value;
  };
  if (cooling.kind === 'cryogen-spray') {
    const spurtS = given('spurtS', usualSpurtS);
    const delayS = given('delayS', usualDelayS);
    const filmS = given('postS', filmPerSpurt * spurtS);
    const fromS = -(spurtS + delayS);
    return [fromS, Math.max(-delayS + filmS, fromS)];
  }
  const usual = cooling.kind === 'contact' ? windowTimes : airTimes;
  return [-given('preS', usual.preS), emissionEndS + given('postS', usual.postS)];
}

function figureOf(id: string, figures: ThermalFigures): CoolingFigure {
  const figure = figures.cooling.get(id);
  if (figure) return figure;
  throw new DomainError('unknown-reference', `no cooling figure '${id}' in the reference data`, { id });
}
