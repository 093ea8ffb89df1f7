import type { Cooling } from '../../domain/thermal/surface-cooling.js';
import { askWindow } from './ask.js';

// Which melanosome fraction makes the computed epidermal limit equal the greatest fluence that practice bears. The first two settings
// are those the phototype map rests on; the others try it. Prints a markdown table.

interface Practice {
  readonly setting: string;
  readonly wavelengthNm: number;
  readonly durationS: number;
  readonly diameterMm: number;
  readonly cooling: Cooling;
  readonly use: 'fit' | 'trial';
  /** Greatest fluence borne, by phototype. */
  readonly borneJPerCm2: Readonly<Record<string, number>>;
}

const contact: Cooling = { kind: 'contact', temperatureC: 5 };
const practices: readonly Practice[] = [
  {
    setting: '585 nm, 1.5 ms, 5 mm, cryogen 200 ms (Tunnell2003)',
    wavelengthNm: 585,
    durationS: 1.5e-3,
    diameterMm: 5,
    cooling: { kind: 'cryogen-spray', spurtS: 0.2, delayS: 0 },
    use: 'fit',
    borneJPerCm2: { IV: 30, V: 8, VI: 8 },
  },
  {
    setting: '755 nm, 3 ms, 12 mm, cryogen 30 ms (Eremia2001)',
    wavelengthNm: 755,
    durationS: 3e-3,
    diameterMm: 12,
    cooling: { kind: 'cryogen-spray', spurtS: 0.03, delayS: 0.03 },
    use: 'fit',
    borneJPerCm2: { I: 50, II: 40, III: 40, IV: 20, V: 20 },
  },
  {
    setting: '595 nm, 1.5 ms, 7 mm, cryogen 30 ms (Chang2002)',
    wavelengthNm: 595,
    durationS: 1.5e-3,
    diameterMm: 7,
    cooling: { kind: 'cryogen-spray', spurtS: 0.03, delayS: 0.03 },
    use: 'trial',
    borneJPerCm2: { I: 10, II: 10, III: 10, IV: 10 },
  },
  {
    setting: '800 nm, 20 ms, 9 mm, contact 5 C (800 nm diode, 10-40 J/cm2)',
    wavelengthNm: 800,
    durationS: 2e-2,
    diameterMm: 9,
    cooling: contact,
    use: 'trial',
    borneJPerCm2: { II: 40, III: 40 },
  },
  {
    setting: '1064 nm, 10 to 30 ms, 10 mm, contact (TanziAlster2004)',
    wavelengthNm: 1064,
    durationS: 2e-2,
    diameterMm: 10,
    cooling: contact,
    use: 'trial',
    borneJPerCm2: { II: 60, IV: 60, VI: 60 },
  },
];

function fractionFor(practice: Practice, wantedJPerCm2: number): number {
  const limitAt = (melanosomeFraction: number) =>
    askWindow({
      skin: { melanosomeFraction },
      target: { kind: 'water-layer', depthMm: 0.5 },
      wavelengthNm: practice.wavelengthNm,
      pulse: { durationS: practice.durationS },
      spot: { shape: 'circle', diameterMm: practice.diameterMm },
      cooling: practice.cooling,
    }).epidermalLimitJPerCm2;
  let [low, high] = [Math.log(1e-4), Math.log(0.4)];
  for (let step = 0; step < 40; step++) {
    const middle = (low + high) / 2;
    if (limitAt(Math.exp(middle)) > wantedJPerCm2) low = middle;
    else high = middle;
  }
  return Math.exp((low + high) / 2);
}

const phototypes = ['I', 'II', 'III', 'IV', 'V', 'VI'];
const lines = [`| setting | use | ${phototypes.join(' | ')} |`, `|---|---|${phototypes.map(() => '---:').join('|')}|`];
const fitted = new Map<string, number[]>();
for (const practice of practices) {
  const cells = phototypes.map((phototype) => {
    const borne = practice.borneJPerCm2[phototype];
    if (borne === undefined) return '';
    const fraction = fractionFor(practice, borne);
    if (practice.use === 'fit') fitted.set(phototype, [...(fitted.get(phototype) ?? []), fraction]);
    return fraction.toPrecision(2);
  });
  lines.push(`| ${practice.setting} | ${practice.use} | ${cells.join(' | ')} |`);
}
const means = phototypes.map((phototype) => {
  const values = fitted.get(phototype) ?? [];
  return values.length === 0
    ? ''
    : Math.exp(values.reduce((sum, value) => sum + Math.log(value), 0) / values.length).toPrecision(2);
});
lines.push(`| geometric mean of the fitted | | ${means.join(' | ')} |`);
process.stdout.write(`${lines.join('\n')}\n`);
