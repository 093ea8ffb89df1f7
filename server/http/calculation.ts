import { createHash } from 'node:crypto';
import canonicalize from 'canonicalize';
import type { Remarks } from '../../domain/quantities/caution.js';
import { bannerText } from '../clinical-banner.js';
import { modelVersion, serviceVersion } from '../version.js';

/** What the provenance of a reply needs to know of the service. */
export interface Provenanced {
  readonly now: () => Date;
  readonly dataVersion: { readonly name: string; readonly version: string; readonly sha256: string };
}

export interface Presentable<T> {
  readonly result: T;
  readonly remarks: Remarks;
  readonly body: { readonly asOf?: string | undefined; readonly seed?: number | undefined };
  readonly seed?: number | undefined;
}

/** The reply of a calculation. Same body, asOf and seed on the same model and data: the same bytes. */
export function presentCalculation<T>({ result, remarks, body, seed }: Presentable<T>, { now, dataVersion }: Provenanced) {
  return {
    banner: bannerText,
    result,
    cautions: remarks.cautions,
    assumptions: remarks.assumptions,
    provenance: {
      service: serviceVersion,
      model: modelVersion,
      data: [dataVersion],
      inputsSha256: createHash('sha256')
        .update(canonicalize(body) ?? '')
        .digest('hex'),
      asOf: body.asOf ?? now().toISOString(),
      ...(seed === undefined ? {} : { seed }),
    },
  };
}
