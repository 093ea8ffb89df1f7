/** Tables of the ziggurat for the exponential distribution of mean 1: 256 strips of equal area under exp(-x). */
export interface ExponentialZiggurat {
  /** Width of strip i over 2^24: a 24-bit integer times this is a distance. */
  readonly scales: Float64Array;
  /** 24-bit integers below this lie wholly under the curve. */
  readonly insideBelow: Int32Array;
  /** exp(-x) at the right edge of strip i. */
  readonly heights: Float64Array;
  /** Where the tail beyond the base strip begins. */
  readonly tailStart: number;
}

const strips = 256;
const tailStart = 7.69711747013105; // right edge of the base strip for 256 strips, @source Marsaglia2000 section 3
const stripArea = 3.949659822581557e-3; // area of each strip, @source Marsaglia2000 section 3

/** Builds the tables. Index and distance are drawn from separate bits of one word, which removes the correlation of the original.
 *  @source Marsaglia2000 section 3; Doornik2005 section 3 (separate bits) */
export function exponentialZiggurat(): ExponentialZiggurat {
  const edges = new Float64Array(strips + 1);
  edges[0] = stripArea / Math.exp(-tailStart);
  edges[1] = tailStart;
  for (let i = 2; i < strips; i++) edges[i] = -Math.log(stripArea / edges[i - 1]! + Math.exp(-edges[i - 1]!));
  const scales = new Float64Array(strips);
  const insideBelow = new Int32Array(strips);
  const heights = new Float64Array(strips + 1);
  for (let i = 0; i < strips; i++) {
    scales[i] = edges[i]! / 2 ** 24;
    insideBelow[i] = Math.floor((edges[i + 1]! / edges[i]!) * 2 ** 24);
    heights[i] = Math.exp(-edges[i]!);
  }
  heights[strips] = 1;
  return { scales, insideBelow, heights, tailStart };
}

/** The circle in 256 sectors: cosine and sine of each sector's middle, and the angle that one unit of a 24-bit integer turns. */
export function azimuthSectors(): { readonly cosines: Float64Array; readonly sines: Float64Array; readonly turnUnit: number } {
  const middle = (_: unknown, i: number) => (2 * Math.PI * i) / 256;
  const angles = Array.from({ length: 256 }, middle);
  return {
    cosines: Float64Array.from(angles, Math.cos),
    sines: Float64Array.from(angles, Math.sin),
    turnUnit: (2 * Math.PI) / 2 ** 32,
  };
}
