/** A beam's cross-section on the skin. Flat-top diameters and widths are edges; a Gaussian diameter is 1/e^2. */
export type Spot =
  | { readonly shape: 'circle'; readonly diameterMm: number }
  | { readonly shape: 'square'; readonly widthMm: number }
  | { readonly shape: 'rectangle'; readonly widthMm: number; readonly heightMm: number }
  | { readonly shape: 'gaussian'; readonly diameterMm: number };
