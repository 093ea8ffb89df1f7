import { expect, it } from 'vitest';
import { lightErrorFraction } from '../../../domain/transport/light-error.js';

it('states an error that never shrinks as the beam narrows, whatever its shape', () => {
  const widths = [20, 6, 5.9, 3, 2, 1, 0.7, 0.5, 0.25, 0.12, 0.05];
  const errors = widths.map((diameterMm) => lightErrorFraction({ shape: 'circle', diameterMm }));
  expect(errors).toEqual([...errors].sort((a, b) => a - b));
  expect(errors[0]).toBe(lightErrorFraction(null));
  expect(lightErrorFraction({ shape: 'square', widthMm: 3 })).toBe(lightErrorFraction({ shape: 'circle', diameterMm: 3 }));
  expect(lightErrorFraction({ shape: 'rectangle', widthMm: 10, heightMm: 1 })).toBe(
    lightErrorFraction({ shape: 'circle', diameterMm: 1 }),
  );
  expect(lightErrorFraction({ shape: 'gaussian', diameterMm: 3 * Math.SQRT2 * 1.001 })).toBe(0.02);
  expect(lightErrorFraction({ shape: 'measured', radiiMm: [0, 1.5, 2], relativeIrradiances: [1, 1, 0] })).toBe(0.02);
});
