import { inSeries } from './heat-grid.js';

/** A temperature between cell centers as a weighted sum of two cells' temperatures. */
export interface PlaceWeights {
  readonly cell: number;
  readonly weight: number;
  readonly nextWeight: number;
}

/** Weights of cells `cell` and `cell + 1` at a place: linear from each center to the face between them, where the flux into the face
 *  equals the flux out of it. Beyond the first or last center the temperature of that cell holds.
 *  `halfConductance(cell, face)` is the conductance from a cell's center to a face. */
export function placeWeights(
  place: number,
  faces: Float64Array,
  centers: Float64Array,
  halfConductance: (cell: number, face: number) => number,
): PlaceWeights {
  const last = centers.length - 1;
  if (place <= centers[0]!) return { cell: 0, weight: 1, nextWeight: 0 };
  if (place >= centers[last]!) return { cell: last - 1, weight: 0, nextWeight: 1 };
  let cell = 0;
  while (centers[cell + 1]! < place) cell++;
  const face = cell + 1;
  const near = halfConductance(cell, face);
  const far = halfConductance(cell + 1, face);
  const flux = inSeries(near, far);
  const faceAt = faces[face]!;
  const share =
    place <= faceAt
      ? (flux / near) * ((place - centers[cell]!) / (faceAt - centers[cell]!))
      : 1 - (flux / far) * ((centers[cell + 1]! - place) / (centers[cell + 1]! - faceAt));
  return { cell, weight: 1 - share, nextWeight: share };
}
