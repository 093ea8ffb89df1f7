import { z } from 'zod';
import {
  CoolingSchema,
  PulseCount,
  PulseSchema,
  pulseEndS,
  RepetitionRateHz,
  SpotSchema,
  WavelengthNm,
} from '../../schemas/beam.js';
import { reproducible } from '../../schemas/calculation.js';
import { count, quantity, whenever } from '../../schemas/numbers.js';
import { SkinSchema } from '../../schemas/skin.js';
import { TargetSchema } from '../../schemas/target.js';

const setting = {
  skin: SkinSchema,
  target: TargetSchema,
  wavelengthNm: WavelengthNm,
  spot: SpotSchema,
  pulse: PulseSchema,
  repetitionRateHz: RepetitionRateHz.optional(),
  pulseCount: PulseCount.optional(),
  cooling: CoolingSchema.optional(),
  ...reproducible,
};

type Timed = { pulse?: unknown; repetitionRateHz?: number | undefined; pulseCount?: number | undefined } | null | undefined;

const trainIsWhole = (body: Timed): boolean => (body?.pulseCount ?? 1) === 1 || body?.repetitionRateHz !== undefined;

function pulseFitsPeriod(body: Timed): boolean {
  const pulse = PulseSchema.safeParse(body?.pulse);
  if (!pulse.success || typeof body?.repetitionRateHz !== 'number') return true;
  return pulseEndS(pulse.data) * body.repetitionRateHz <= 1 + 1e-9;
}

const needsRate = { error: 'is needed when pulseCount is more than 1', path: ['repetitionRateHz'], ...whenever };
const fitsPeriod = { error: 'the pulse is longer than the period 1 / repetitionRateHz', path: ['pulse'], ...whenever };

const example = {
  skin: { phototype: 'II' },
  target: { kind: 'vessel', diameterUm: 100, depthMm: 0.4 },
  wavelengthNm: 585,
  spot: { shape: 'circle', diameterMm: 7 },
  pulse: { durationS: 0.0015 },
  cooling: { kind: 'contact', temperatureC: 5 },
};

export const WindowRequest = z
  .strictObject(setting)
  .refine(trainIsWhole, needsRate)
  .refine(pulseFitsPeriod, fitsPeriod)
  .meta({ id: 'WindowRequest', examples: [example] });

export const HeatingRequest = z
  .strictObject({ ...setting, fluenceJPerCm2: quantity('J/cm2', 1e-6, 1000, 'Fluence of one pulse on the skin') })
  .refine(trainIsWhole, needsRate)
  .refine(pulseFitsPeriod, fitsPeriod)
  .meta({ id: 'HeatingRequest', examples: [{ ...example, fluenceJPerCm2: 6 }] });

export const LadderRequest = z
  .strictObject({
    ...setting,
    firstFraction: quantity('', 0.05, 0.8, 'First step over the lower bound of the epidermal limit; 0.4 when absent').optional(),
    steps: count(2, 12, 'Steps; 4 when absent').optional(),
  })
  .refine(trainIsWhole, needsRate)
  .refine(pulseFitsPeriod, fitsPeriod)
  .meta({ id: 'TestLadderRequest', examples: [example] });

export const LadderResult = z
  .object({
    steps: z.array(z.object({ fluenceJPerCm2: z.number(), fractionOfLimit: z.number() })),
    waitS: z.number().describe('Least wait before the next step is judged'),
    endPoints: z.array(z.string()),
    stopRules: z.array(z.string()),
    epidermalLimitLowJPerCm2: z.number().describe('5 % quantile of the epidermal limit'),
    targetThresholdJPerCm2: z.number().nullable().describe('Median of the threshold of the target'),
  })
  .meta({ id: 'TestLadderResult', description: 'Steps for test patches, never one number to treat at' });

export const limits = ['basal-layer', 'melanosome', 'surface', 'vaporization', 'breakdown'] as const;

export const WindowResult = z
  .object({
    targetThresholdJPerCm2: z
      .number()
      .nullable()
      .describe('Least fluence per pulse with the asked effect; null when none up to 1,000 J/cm2 has it'),
    epidermalLimitJPerCm2: z.number().describe('Greatest fluence per pulse that spares the epidermis'),
    therapeuticRatio: z.number().nullable().describe('Limit over threshold; above 1 there is a window'),
    limitedBy: z.enum(limits),
    relaxationTimeS: z.number(),
    thermalDamageTimeS: z
      .number()
      .nullable()
      .optional()
      .describe('Extended theory: time for the edge of the target to reach damage with its heater held at 100 C'),
    fluenceRatioAtTarget: z.number(),
    absorptionContrast: z.number(),
    reasons: z.array(z.string()),
  })
  .meta({ id: 'WindowResult' });

const places = ['surface', 'basal-layer', 'target-center', 'target-edge'] as const;

export const HeatingResult = z
  .object({
    timesS: z.array(z.number()).describe('From the start of the first pulse'),
    places: z.array(
      z.object({
        place: z.enum(places),
        temperaturesC: z.array(z.number()),
        peakC: z.number(),
        peakAtS: z.number(),
        damageIntegral: z.number(),
        cem43Min: z.number(),
      }),
    ),
    vaporization: z.object({ expected: z.boolean(), place: z.enum([...places, 'melanosome']).optional() }),
  })
  .meta({ id: 'HeatingResult' });
