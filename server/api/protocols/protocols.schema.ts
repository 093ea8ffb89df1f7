import { z } from 'zod';
import { SpotSchema, WavelengthNm } from '../../schemas/beam.js';
import { freeText } from '../../schemas/free-text.js';
import { count, instant, quantity, text, whenever } from '../../schemas/numbers.js';

const fluence = (description: string) => quantity('J/cm2', 1e-6, 1e5, description).optional();
const pulse = (description: string) => quantity('s', 1e-15, 1000, description).optional();
const ita = (description: string) => quantity('degrees', -90, 90, description).optional();

const ascends = (low: string, high: string) => ({
  check: (envelope: Record<string, unknown>) =>
    envelope?.[low] === undefined || envelope[high] === undefined || Number(envelope[low]) <= Number(envelope[high]),
  told: { error: `must not be below ${low}`, path: [high], ...whenever },
});
const [itaRange, fluenceRange, pulseRange] = [
  ascends('itaMinDegrees', 'itaMaxDegrees'),
  ascends('fluenceMinJPerCm2', 'fluenceMaxJPerCm2'),
  ascends('pulseMinS', 'pulseMaxS'),
];

export const EnvelopeSchema = z
  .strictObject({
    wavelengthNm: WavelengthNm,
    phototypes: z
      .array(z.enum(['I', 'II', 'III', 'IV', 'V', 'VI']))
      .min(1)
      .max(6)
      .optional(),
    itaMinDegrees: ita('Band of pigmentation: least typology angle'),
    itaMaxDegrees: ita('Band of pigmentation: greatest typology angle'),
    fluenceMinJPerCm2: fluence('Least fluence on the panel'),
    fluenceMaxJPerCm2: fluence('Greatest fluence; the delivered interval is held against it too'),
    pulseMinS: pulse('Shortest pulse'),
    pulseMaxS: pulse('Longest pulse'),
    spots: z.array(SpotSchema).min(1).max(50).optional(),
    repetitionMaxHz: quantity('Hz', 0.001, 1e9, 'Greatest repetition rate').optional(),
    stackMaxCount: count(1, 1000, 'Most pulses on one place').optional(),
    passMaxCount: count(1, 100, 'Most passes').optional(),
    coolingKinds: z
      .array(z.enum(['none', 'contact', 'cryogen-spray', 'chilled-air']))
      .min(1)
      .max(4)
      .optional(),
    intervalMinDays: quantity('days', 0, 3650, 'Least time between visits').optional(),
  })
  .refine(itaRange.check, itaRange.told)
  .refine(fluenceRange.check, fluenceRange.told)
  .refine(pulseRange.check, pulseRange.told)
  .meta({
    id: 'Envelope',
    description: 'Settings allowed for one wavelength and band of pigmentation; what is absent is not limited',
  });

export const ProtocolRequest = z
  .strictObject({
    name: text(120, 'Name of the protocol'),
    indication: text(120, 'Indication'),
    envelopes: z
      .array(EnvelopeSchema)
      .min(1, { error: 'needs at least one envelope' })
      .max(100, { error: 'takes at most 100 envelopes' }),
    effectiveFrom: instant.optional().describe('Start of force; the approval when absent'),
    effectiveUntil: instant.optional().describe('End of force; until a later version when absent'),
    author: text(80, 'Who wrote it, as a staff code'),
    notes: freeText(2000, 'Remarks').optional(),
  })
  .meta({
    id: 'ProtocolRequest',
    example: {
      name: 'Facial telangiectasia, light skin',
      indication: 'telangiectasia',
      envelopes: [
        { wavelengthNm: 595, phototypes: ['I', 'II', 'III'], fluenceMaxJPerCm2: 9, pulseMinS: 0.0015, pulseMaxS: 0.02 },
      ],
      author: 'LP-1',
    },
  });

export const ProtocolItem = z
  .looseObject({
    id: z.string(),
    version: z.int(),
    recordedAt: z.string(),
    name: z.string(),
    indication: z.string(),
    approved: z.boolean().describe('This version has been approved by a second person'),
    versionInForce: z.int().nullable().describe('Version in force at asOf'),
  })
  .meta({ id: 'Protocol' });

export const ApprovalRequest = z
  .strictObject({
    version: count(1, 1_000_000, 'Version that is approved; the latest when absent').optional(),
    by: text(80, 'Who approves, as a staff code').optional(),
    notes: freeText(2000, 'Remarks').optional(),
  })
  .meta({ id: 'ApprovalRequest', example: { version: 1, by: 'MD-2' } });

export const ApprovalItem = z
  .looseObject({ id: z.string(), protocolId: z.string(), version: z.int(), recordedAt: z.string(), approvedByKey: z.string() })
  .meta({ id: 'Approval' });
