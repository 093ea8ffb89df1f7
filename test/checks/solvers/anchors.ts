import type { Target } from '../../../domain/targets/target.js';
import type { Cooling } from '../../../domain/thermal/surface-cooling.js';
import type { Phototype } from '../../../domain/tissue/skin-figures.js';
import { askWindow } from '../../support/ask.js';

/** A published setting: phototype, wavelength in nm, pulse in s, spot in mm, target and cooling by the names below. */
interface Setting {
  readonly skin: Phototype;
  readonly nm: number;
  readonly s: number;
  readonly mm: number;
  readonly target: keyof typeof targets;
  readonly cooling?: keyof typeof coolings;
}

const targets = {
  'vessel 50 um at 0.25 mm': { kind: 'vessel', diameterUm: 50, depthMm: 0.25 },
  'vessel 60 um at 0.3 mm': { kind: 'vessel', diameterUm: 60, depthMm: 0.3 },
  'vessel 100 um at 0.3 mm': { kind: 'vessel', diameterUm: 100, depthMm: 0.3 },
  // A coarse dark shaft; no row of the anchors states hair or follicle, so these are ours for all of them.
  'hair 80 in 200 um at 3 mm': { kind: 'hair-follicle', shaftDiameterUm: 80, follicleDiameterUm: 200, depthMm: 3 },
} satisfies Record<string, Target>;

const coolings = {
  'cryogen 200 ms': { kind: 'cryogen-spray', spurtS: 0.2, delayS: 0 },
  'cryogen 30 ms': { kind: 'cryogen-spray', spurtS: 0.03, delayS: 0.03 },
  'window 4 C': { kind: 'contact', temperatureC: 4 },
  'window 5 C': { kind: 'contact', temperatureC: 5 },
  'cold air': { kind: 'chilled-air', temperatureC: -10 },
} satisfies Record<string, Cooling>;

function windowAt({ skin, nm, s, mm, target, cooling }: Setting) {
  return askWindow({
    skin: { phototype: skin },
    target: targets[target],
    ...(cooling ? { cooling: coolings[cooling] } : {}),
    wavelengthNm: nm,
    pulse: { durationS: s },
    spot: { shape: 'circle', diameterMm: mm },
  });
}

const thresholdAt = (setting: Setting): number => windowAt(setting).targetThresholdJPerCm2 ?? Number.POSITIVE_INFINITY;

export const solvers = {
  'logarithm of target threshold': (setting: Setting) => Math.log(thresholdAt(setting)),
  'logarithm of epidermal limit': (setting: Setting) => Math.log(windowAt(setting).epidermalLimitJPerCm2),
  'epidermal limit at least (1 yes)': ({ least, ...setting }: Setting & { least: number }) =>
    windowAt(setting).epidermalLimitJPerCm2 >= least ? 1 : 0,
  'epidermal limit at most (1 yes)': ({ most, ...setting }: Setting & { most: number }) =>
    windowAt(setting).epidermalLimitJPerCm2 <= most ? 1 : 0,
  'fluence in use lies in the window (1 yes)': ({ inUse, ...setting }: Setting & { inUse: number }) => {
    const { targetThresholdJPerCm2: threshold, epidermalLimitJPerCm2: limit } = windowAt(setting);
    return threshold !== null && threshold <= inUse && inUse <= limit ? 1 : 0;
  },
  'slope of threshold with pulse': ({ from, to, ...setting }: Setting & { from: number; to: number }) =>
    Math.log(thresholdAt({ ...setting, s: to }) / thresholdAt({ ...setting, s: from })) / Math.log(to / from),
};
