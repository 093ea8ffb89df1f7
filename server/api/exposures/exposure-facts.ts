import type { EarlierExposure, ExposureFacts } from '../../../domain/alerts/alert.js';
import { setEnergyJ } from '../../../domain/dosimetry/calibration.js';
import { type DeliveredExposure, deliveredExposure } from '../../../domain/dosimetry/delivered-exposure.js';
import type { DeviceResponse, DeviceUse } from '../../../domain/dosimetry/device-response.js';
import { itaDegreesOf } from '../../../domain/tissue/skin.js';
import { pulseEndS } from '../../schemas/beam.js';
import { type DeviceFile, responseOf } from '../devices/device-file.store.js';
import type { ExposureContent } from './exposures.store.js';

/** A value, or null when it is absent or said to be unknown. */
export function known<T>(value: T): Known<T> | null {
  if (value === undefined) return null;
  return typeof value === 'object' && value !== null && 'unknown' in value ? null : (value as Known<T>);
}

type Known<T> = Exclude<T, { unknown: string } | undefined>;

export interface Dose {
  readonly use: DeviceUse;
  readonly response: DeviceResponse;
  readonly delivered: DeliveredExposure;
}

export function useOf(exposure: ExposureContent): DeviceUse {
  return {
    atMs: Date.parse(exposure.at),
    wavelengthNm: exposure.wavelengthNm,
    spot: exposure.spot,
    pulseDurationS: pulseEndS(exposure.pulse),
    handpiece: known(exposure.handpiece),
    setEnergyJ: setEnergyJ(exposure.set, exposure.spot),
  };
}

/** What was delivered, under the calibration in force at the exposure's own time. */
export function doseOf(exposure: ExposureContent, file: DeviceFile): Dose {
  const use = useOf(exposure);
  const response = responseOf(file, use);
  return { use, response, delivered: deliveredExposure(exposure.set, exposure.spot, response) };
}

/** The exposure as the rules see it. */
export function factsOf(
  exposure: ExposureContent,
  file: DeviceFile,
  dose: Dose,
  protocol: ExposureFacts['protocol'],
  last: EarlierExposure | null,
  site: string | null = known(exposure.site),
): ExposureFacts {
  const pigmentation = known(exposure.pigmentation);
  const { outputToleranceFraction, handpieces } = file.device.content;
  const { use } = dose;
  return {
    atMs: use.atMs,
    wavelengthNm: use.wavelengthNm,
    spot: use.spot,
    pulseDurationS: use.pulseDurationS,
    handpiece: use.handpiece,
    set: exposure.set,
    pulseCount: exposure.pulseCount,
    stackCount: exposure.stackCount ?? 1,
    repetitionRateHz: known(exposure.repetitionRateHz),
    coolingKind: known(exposure.cooling)?.kind ?? null,
    passNumber: known(exposure.passNumber),
    site,
    itaDegrees: itaOf(pigmentation),
    phototype: pigmentation?.phototype ?? null,
    lines: file.lines,
    handpieces,
    outputToleranceFraction,
    response: dose.response,
    delivered: dose.delivered,
    protocol,
    last,
  };
}

type Pigmentation = Exclude<NonNullable<ExposureContent['pigmentation']>, { unknown: string }>;

function itaOf(pigmentation: Pigmentation | null): number | null {
  if (pigmentation?.itaDegrees !== undefined) return pigmentation.itaDegrees;
  const { lightnessL, yellownessB } = pigmentation ?? {};
  return lightnessL === undefined || yellownessB === undefined ? null : itaDegreesOf(lightnessL, yellownessB);
}

/** What a complete record holds beside the required fields. */
const completeRecord = [
  'courseId',
  'protocolId',
  'handpiece',
  'repetitionRateHz',
  'cooling',
  'passNumber',
  'site',
  'pigmentation',
  'eyewear',
  'endPoint',
  'operator',
] as const;

export function missingFields(exposure: ExposureContent): string[] {
  return completeRecord.filter(
    (name) => exposure[name] === undefined && !(name === 'repetitionRateHz' && exposure.pulseCount === 1),
  );
}
