import type { z } from 'zod';
import { sameSpot } from '../../../domain/beam/same-spot.js';
import { spotAreaCm2 } from '../../../domain/beam/spot-area.js';
import { type Delivery, deliveredFluence, pulseEnergyForFluenceJ } from '../../../domain/dosimetry/delivered-fluence.js';
import { combineRelative } from '../../../domain/dosimetry/uncertainty-budget.js';
import { interactionRegime } from '../../../domain/interaction/regime.js';
import { Remarks } from '../../../domain/quantities/caution.js';
import { electricFieldVPerM, photonEnergyEv } from '../../../domain/quantities/light-units.js';
import type { Reader } from '../../db/reader.js';
import { RequestError } from '../../http/request-error.js';
import { pulseEndS } from '../../schemas/beam.js';
import { deviceLines } from '../devices/devices.store.js';
import type { FluenceRequest, SettingsRequest } from './fluence.schema.js';

type Body = z.output<typeof FluenceRequest>;
type SettingsBody = z.output<typeof SettingsRequest>;

const coverageFactor = 2; // about 95 %, JCGM100 6.3.3

/** Standard uncertainties that are taken when none are stated, k = 1. */
const usual = {
  pulseEnergy: { value: 0.05, source: 'DeviceRepeatability2018', status: 'read-secondary' }, // week-to-week stability of healthy devices
  spotDiameter: { value: 0.04, source: 'common practice', status: 'convention' },
  transmission: { value: 0.02, source: 'common practice', status: 'convention' },
  calibration: { value: 0.1, source: 'IEC60601', status: 'derived' }, // outer limit of 20 % taken as two standard deviations
} as const;

const uncertain = (['pulseEnergy', 'spotDiameter', 'transmission', 'calibration'] as const).map((quantity) => ({
  quantity,
  sensitivity: quantity === 'spotDiameter' ? -2 : 1,
  assumption: { name: `relativeUncertainties.${quantity}`, ...usual[quantity] },
}));

function uncertaintyOf(body: Pick<Body, 'relativeUncertainties'>, remarks: Remarks) {
  const given = body.relativeUncertainties;
  const inputs: { quantity: string; relativeStandard: number; sensitivity: number }[] = [];
  for (const { quantity, sensitivity, assumption } of uncertain) {
    const stated = given?.[quantity];
    if (stated === undefined) remarks.assume(assumption);
    inputs.push({ quantity, relativeStandard: stated ?? assumption.value, sensitivity });
  }
  return combineRelative(inputs);
}

/** Emission times of one pulse: their sum, and the greatest share of energy over time. */
function timing(pulse: Body['pulse'], exposureTimeS: number | undefined): Pick<Delivery, 'emissionS' | 'peakSharePerS'> {
  if (pulse === undefined || 'durationS' in pulse) {
    const emissionS = pulse?.durationS ?? exposureTimeS!;
    return { emissionS, peakSharePerS: 1 / emissionS };
  }
  const parts = pulse.subPulses;
  return {
    emissionS: parts.reduce((sum, { durationS }) => sum + durationS, 0),
    peakSharePerS: Math.max(...parts.map(({ durationS, energyFraction }) => energyFraction / durationS)),
  };
}

const lossless = {
  transmissionFraction: { name: 'transmissionFraction', value: 1, source: 'no loss was stated', status: 'convention' },
  calibrationFactor: { name: 'calibrationFactor', value: 1, source: 'the display is taken at its word', status: 'convention' },
} as const;

function filled(body: Pick<Body, keyof typeof lossless>, name: keyof typeof lossless, remarks: Remarks): number {
  const value = body[name];
  if (value === undefined) remarks.assume(lossless[name]);
  return value ?? 1;
}

export function deliver(body: Body) {
  const remarks = new Remarks();
  const times = timing(body.pulse, body.exposureTimeS);
  const pulseEnergyJ = body.pulseEnergyJ ?? body.averagePowerW! * (body.exposureTimeS ?? 1 / body.repetitionRateHz!);
  const delivered = deliveredFluence({
    emissionS: times.emissionS,
    peakSharePerS: times.peakSharePerS,
    transmissionFraction: filled(body, 'transmissionFraction', remarks),
    calibrationFactor: filled(body, 'calibrationFactor', remarks),
    pulseEnergyJ,
    spot: body.spot,
    repetitionRateHz: body.repetitionRateHz ?? 0,
    pulseCount: body.pulseCount ?? 1,
    overlapFraction: body.overlapFraction ?? 1,
  });
  const axial = body.spot.shape === 'gaussian' ? 2 : 1;
  const regime = interactionRegime(1 / times.peakSharePerS, axial * delivered.irradianceWPerCm2, body.wavelengthNm);
  if (regime === 'plasma-mediated') {
    remarks.caution(
      'plasma',
      'The irradiance is beyond the threshold of optical breakdown: plasma, shock waves and cavitation, which no thermal model here follows.',
    );
  }
  if (times.emissionS < 1e-11) {
    remarks.caution(
      'beyond-thermal-model',
      'Below about 10 ps the thermal model ends: multiphoton absorption and ionization set the effect.',
    );
  }
  if ((body.pulseCount ?? 1) > 1) {
    remarks.caution(
      'cumulative-is-bookkeeping',
      'Cumulative J/cm2 is bookkeeping, not a biological dose; margins of single pulses do not hold for stacked pulses.',
    );
  }
  const { relativeStandard, budget } = uncertaintyOf(body, remarks);
  const expanded = coverageFactor * relativeStandard;
  const result = {
    fluenceJPerCm2: delivered.fluenceJPerCm2,
    peakFluenceJPerCm2: delivered.peakFluenceJPerCm2,
    irradianceWPerCm2: delivered.irradianceWPerCm2,
    peakPowerW: delivered.peakPowerW,
    averagePowerW: delivered.averagePowerW,
    dutyCycleFraction: delivered.dutyCycleFraction,
    cumulativeFluenceJPerCm2: delivered.cumulativeFluenceJPerCm2,
    electricFieldVPerM: electricFieldVPerM(axial * delivered.irradianceWPerCm2),
    interactionRegime: regime,
    photonEnergyEv: photonEnergyEv(body.wavelengthNm),
    uncertainty: {
      relativeStandard,
      coverageFactor,
      lowJPerCm2: Math.max(0, delivered.fluenceJPerCm2 * (1 - expanded)),
      highJPerCm2: delivered.fluenceJPerCm2 * (1 + expanded),
      budget,
    },
  };
  return { result, remarks, body };
}

export function settle(body: SettingsBody, reader: Reader) {
  const remarks = new Remarks();
  const pulseEnergyJ = pulseEnergyForFluenceJ(body.fluenceJPerCm2, {
    spot: body.spot,
    transmissionFraction: filled(body, 'transmissionFraction', remarks),
    calibrationFactor: filled(body, 'calibrationFactor', remarks),
  });
  const expanded = coverageFactor * uncertaintyOf(body, remarks).relativeStandard;
  const panelFluence = pulseEnergyJ / spotAreaCm2(body.spot);
  const reasons: string[] = [];
  if (body.deviceId !== undefined) reasons.push(...deviceObstacles(body, reader, pulseEnergyJ, panelFluence));
  else if (body.energyMaxJ === undefined) {
    remarks.caution('device-limits-unknown', 'No greatest energy was stated: whether the device can deliver this is not judged.');
  }
  if (body.energyMaxJ !== undefined && pulseEnergyJ > body.energyMaxJ) reasons.push(tooMuch(pulseEnergyJ, body.energyMaxJ));
  const rate = body.repetitionRateHz;
  const result = {
    pulseEnergyJ,
    panel: {
      pulseEnergyJ,
      fluenceJPerCm2: panelFluence,
      ...(rate === undefined ? {} : { averagePowerW: pulseEnergyJ * rate, repetitionRateHz: rate }),
    },
    deliverable: reasons.length === 0,
    reasons,
    lowJPerCm2: Math.max(0, body.fluenceJPerCm2 * (1 - expanded)),
    highJPerCm2: body.fluenceJPerCm2 * (1 + expanded),
  };
  return { result, remarks, body };
}

function tooMuch(pulseEnergyJ: number, energyMaxJ: number): string {
  return `not deliverable: ${Number(pulseEnergyJ.toPrecision(4))} J are needed, the device gives ${energyMaxJ} J`;
}

function deviceObstacles(body: SettingsBody, reader: Reader, pulseEnergyJ: number, panelFluenceJPerCm2: number): string[] {
  const deviceId = body.deviceId!;
  const { lines, missing, outOfService } = deviceLines(reader, [deviceId]);
  if (missing.length + outOfService.length > 0) {
    const detail = missing.length > 0 ? `unknown device ${deviceId}` : `device ${deviceId} is out of service`;
    throw new RequestError('unknown-reference', 'The device is unknown or out of service.', [{ pointer: '/deviceId', detail }]);
  }
  const line = lines.find(({ wavelengthNm }) => wavelengthNm === body.wavelengthNm);
  if (!line) return [`not deliverable: the device does not emit ${body.wavelengthNm} nm`];
  const reasons: string[] = [];
  const durationS = pulseEndS(body.pulse!);
  if (durationS < line.pulseMinS || durationS > line.pulseMaxS) {
    reasons.push(`not deliverable: the line emits pulses of ${line.pulseMinS} to ${line.pulseMaxS} s`);
  }
  if (!line.spots.some((own) => sameSpot(own, body.spot))) reasons.push('not deliverable: the device has no such spot');
  if ((body.repetitionRateHz ?? 0) > line.repetitionMaxHz)
    reasons.push(`not deliverable: the line repeats at ${line.repetitionMaxHz} Hz at most`);
  if (line.energyMaxJ !== undefined && pulseEnergyJ > line.energyMaxJ) reasons.push(tooMuch(pulseEnergyJ, line.energyMaxJ));
  if (line.fluenceMaxJPerCm2 !== undefined && panelFluenceJPerCm2 > line.fluenceMaxJPerCm2) {
    reasons.push(`not deliverable: the device shows ${line.fluenceMaxJPerCm2} J/cm2 at most`);
  }
  return reasons;
}
