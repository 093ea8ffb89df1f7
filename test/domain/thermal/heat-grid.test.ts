import { describe, expect, it } from 'vitest';
import { gradedFaces, makeHeatGrid } from '../../../domain/thermal/heat-grid.js';
import { dermis, epidermis, fat } from './media.js';

const layers = [
  { thicknessUm: 70, material: epidermis },
  { thicknessUm: 1500, material: dermis },
  { thicknessUm: 500, material: fat },
];

describe('heat grid', () => {
  const grid = makeHeatGrid(layers);

  it('has about a hundred cells, fine at the surface and at the first interface, growing below', () => {
    const sizes = grid.centersUm.map((_, i) => grid.facesUm[i + 1]! - grid.facesUm[i]!);
    expect(sizes.length).toBeGreaterThan(80);
    expect(sizes.length).toBeLessThan(120);
    expect(sizes[0]).toBeLessThan(2.5);
    const interfaceFace = grid.facesUm.indexOf(70);
    expect(sizes[interfaceFace - 1]).toBeLessThan(2.5);
    expect(sizes[interfaceFace]).toBeLessThan(2.5);
    sizes.forEach((size, i) => {
      if (i > 0 && grid.layerOfCell[i] === grid.layerOfCell[i - 1]) expect(size / sizes[i - 1]!).toBeLessThan(1.25);
    });
  });

  it('puts layer interfaces on faces and extends the last layer beyond the reach of heat', () => {
    expect(grid.facesUm).toContain(70);
    expect(grid.facesUm).toContain(1570);
    expect(grid.facesUm[grid.facesUm.length - 1]).toBeGreaterThan(6000 * Math.sqrt(0.1 * 30));
    expect(grid.facesUm.every((face, i) => i === 0 || face > grid.facesUm[i - 1]!)).toBe(true);
  });

  it('keeps the heat capacity of the layers and puts half cells in series across interfaces', () => {
    let epidermisCapacity = 0;
    grid.layerOfCell.forEach((layer, i) => {
      if (layer === 0) epidermisCapacity += grid.capacityJPerM2K[i]!;
    });
    expect(epidermisCapacity).toBeCloseTo(1150 * 3600 * 70e-6, 8);
    grid.conductanceWPerM2K.forEach((g, i) => {
      expect(1 / g).toBeCloseTo(1 / grid.halfConductanceWPerM2K[i]! + 1 / grid.halfConductanceWPerM2K[i + 1]!, 12);
    });
  });

  it('grades a stretch without fine points inside it too', () => {
    const faces = gradedFaces(100, 1000, [0], 1, 0.1);
    expect(faces[faces.length - 1]).toBe(1000);
    expect(faces[0]! - 100).toBeGreaterThan(8);
    expect(faces[0]! - 100).toBeLessThan(13);
  });

  it.each([
    ['no layer', []],
    ['a layer of no thickness', [{ thicknessUm: 0, material: dermis }]],
    ['a layer as thick as no number', [{ thicknessUm: Number.NaN, material: dermis }]],
    ['a material that conducts nothing', [{ thicknessUm: 10, material: { ...dermis, conductivityWPerMK: 0 } }]],
  ])('refuses %s', (_, bad) => {
    expect(() => makeHeatGrid(bad)).toThrowError(/layer/);
  });
});
