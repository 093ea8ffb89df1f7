import type { z } from 'zod';
import { Remarks } from '../../../domain/quantities/caution.js';
import { assertWithin } from '../../../domain/quantities/errors.js';
import type { OpticalLayer } from '../../../domain/tissue/optical-layer.js';
import { resolveSkin } from '../../../domain/tissue/skin.js';
import { skinLayers } from '../../../domain/tissue/skin-layers.js';
import { lightErrorFraction } from '../../../domain/transport/light-error.js';
import type { Parts } from '../../parts.js';
import type { LightRequest } from './light.schema.js';

/** The light field of a request by the fast solver in its fine setting. */
export function shine(body: z.output<typeof LightRequest>, parts: Parts) {
  const remarks = new Remarks();
  const layers = layersOf(body, parts, remarks);
  const bottomMm = layers.reduce((sum, layer) => sum + layer.thicknessUm, 0) / 1000;
  for (const depthMm of body.depthsMm) assertWithin('depthsMm', depthMm, 0, bottomMm);
  const light = parts.lightFields.solve(layers, { accuracy: 'fine' });
  const spot = body.spot ?? null;
  const errorFraction = lightErrorFraction(spot);
  if (errorFraction > 0.05) {
    remarks.caution(
      'narrow-beam',
      `For a beam this narrow the fast solver errs by up to ${Math.round(100 * errorFraction)} %; ask for a reference run.`,
    );
  }
  if (layers.some((layer, i) => i < layers.length - 1 && layer.scatteringPerCm === 0)) {
    remarks.caution('clear-layer', 'Light in and just below a clear layer is approximate: up to 25 % inside it, 9 % just below.');
  }
  const result = {
    depthsMm: body.depthsMm,
    fluenceRatios: Array.from(
      light.fluenceRatios(
        spot,
        body.depthsMm.map((depthMm) => Math.min(depthMm, bottomMm) * 1000),
      ),
    ),
    specularReflectance: light.specularReflectance,
    diffuseReflectance: light.diffuseReflectance,
    transmittance: light.transmittance,
    penetrationDepthMm: light.penetrationDepthMm(spot),
    relativeErrorFraction: errorFraction,
  };
  return { result, remarks, body };
}

function layersOf({ skin, wavelengthNm }: z.output<typeof LightRequest>, { reference }: Parts, remarks: Remarks): OpticalLayer[] {
  const { layers, ...description } = skin;
  if (layers) return layers.map((layer, i) => ({ ...layer, name: layer.name ?? `layer ${i + 1}` }));
  return skinLayers(resolveSkin(description, reference.skin, remarks), wavelengthNm!, reference, remarks);
}
