/* The project's photon walk written in C, step for step, as a yardstick of speed: one half-space, five depth bins, three rings.
   usage: photon-walk PHOTONS; prints photons per CPU second and the diffuse reflectance. */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#define CELLS 1024
#define BINS 5
#define RINGS 3

typedef struct {
  int layers;
  double tops[1], bottoms[1], interaction[1], absorbed_share[1], anisotropy[1], index[3], specular;
  double bin_upper[BINS + 1], bin_lower[BINS + 1], deepest, depth_cells_per_cm;
  int first_bin[CELLS + 1];
  double ring_radius[RINGS], ring_cells_per_cm;
  int first_ring[CELLS + 1];
} plan_t;

typedef struct {
  double reflected, transmitted, roulette_gain, abandoned, absorbed[1], score[BINS * (RINGS + 1)];
} tally_t;

static double cosines[256], sines[256];
static double scales[256], heights[257];
static int32_t inside_below[256];
static const double tail_start = 7.69711747013104972;

static void make_ziggurat(void) {
  double edges[257] = {0};
  const double area = 3.9496598225815571993e-3;
  edges[0] = area / exp(-tail_start);
  edges[1] = tail_start;
  for (int i = 2; i < 256; i++) edges[i] = -log(area / edges[i - 1] + exp(-edges[i - 1]));
  for (int i = 0; i < 256; i++) {
    scales[i] = edges[i] / 16777216.0;
    inside_below[i] = (int32_t)floor(edges[i + 1] / edges[i] * 16777216.0);
    heights[i] = exp(-edges[i]);
  }
  heights[256] = 1;
  for (int i = 0; i < 256; i++) {
    cosines[i] = cos(2 * M_PI * i / 256);
    sines[i] = sin(2 * M_PI * i / 256);
  }
}

static inline uint32_t rotl(uint32_t x, int k) { return (x << k) | (x >> (32 - k)); }

static inline int32_t next_word(uint32_t s[4]) {
  uint32_t result = rotl(s[0] + s[3], 7) + s[0], t = s[1] << 9;
  s[2] ^= s[0];
  s[3] ^= s[1];
  s[1] ^= s[2];
  s[0] ^= s[3];
  s[2] ^= t;
  s[3] = rotl(s[3], 11);
  return (int32_t)result;
}

static double fresnel(double from, double to, double cosine) {
  double ratio = from / to, sine2 = ratio * ratio * (1 - cosine * cosine);
  if (sine2 >= 1) return 1;
  double beyond = sqrt(1 - sine2);
  double s = (ratio * cosine - beyond) / (ratio * cosine + beyond), p = (cosine - ratio * beyond) / (cosine + ratio * beyond);
  return (s * s + p * p) / 2;
}

static void walk_photons(const plan_t *plan, uint32_t seed[4], long photons, tally_t *tally) {
  const double unit = 1.0 / 4294967296.0, turn_unit = 2 * M_PI / 4294967296.0;
  uint32_t random[4];
  memcpy(random, seed, sizeof random);
  const double widest = plan->ring_radius[RINGS - 1];
  int loaded = -1;
  double absorbed_here = 0, top = 0, bottom = 0, free_path = 0, share = 0, g = 0, over = 0, under = 0, slope = 0, sum = 0, scale = 0;
  for (long photon = 0; photon < photons; photon++) {
    double x = 0, y = 0, z = 0, ux = 0, uy = 0, uz = 1, weight = 1 - plan->specular;
    int layer = 0, steps = 0;
    for (;;) {
      double depth;
      for (;;) {
        int32_t word = next_word(random);
        int strip = word & 255;
        int32_t position = (int32_t)((uint32_t)word >> 8);
        depth = (position + 0.5) * scales[strip];
        if (position < inside_below[strip]) break;
        double second = next_word(random) * unit + 0.5 + unit / 2;
        if (strip == 0) {
          depth = tail_start - log(second);
          break;
        }
        if (heights[strip] + second * (heights[strip + 1] - heights[strip]) < exp(-depth)) break;
      }
      for (;;) {
        if (layer != loaded) {
          if (loaded >= 0) tally->absorbed[loaded] += absorbed_here;
          absorbed_here = 0;
          loaded = layer;
          top = plan->tops[layer];
          bottom = plan->bottoms[layer];
          free_path = 1 / plan->interaction[layer];
          share = plan->absorbed_share[layer];
          g = plan->anisotropy[layer];
          over = 1 - g * g;
          under = 1 - g;
          slope = 2 * g;
          sum = 1 + g * g;
          scale = 0.5 / g;
        }
        double length = depth * free_path, after = z + uz * length;
        int leaves = after >= bottom || after < top;
        if (leaves) {
          after = uz > 0 ? bottom : top;
          length = uz == 0 ? 0 : (after - z) / uz;
        }
        double upper = fmin(z, after);
        if (upper < plan->deepest) {
          double lower = fmax(z, after);
          for (int bin = plan->first_bin[(int)(upper * plan->depth_cells_per_cm)]; plan->bin_upper[bin] < lower; bin++) {
            double from = upper > plan->bin_upper[bin] ? upper : plan->bin_upper[bin];
            double overlap = (lower < plan->bin_lower[bin] ? lower : plan->bin_lower[bin]) - from;
            if (overlap > 0) {
              double part = (from + (next_word(random) * unit + 0.5) * overlap - z) / (after - z);
              double px = x + ux * length * part, py = y + uy * length * part, radius = sqrt(px * px + py * py);
              int ring = RINGS;
              if (radius < widest) {
                ring = plan->first_ring[(int)(radius * plan->ring_cells_per_cm)];
                while (radius >= plan->ring_radius[ring]) ring++;
              }
              tally->score[bin * (RINGS + 1) + ring] += weight * length * overlap / (lower - upper);
            }
          }
        }
        x += ux * length;
        y += uy * length;
        z = after;
        if (!leaves) break;
        if (++steps > 1000000) {
          tally->abandoned += weight;
          goto done;
        }
        depth = fmax(0, depth - length / free_path);
        int down = uz > 0, next = down ? layer + 1 : layer - 1;
        double from_index = plan->index[layer + 1], to_index = plan->index[next + 1];
        if (from_index != to_index) {
          if (next_word(random) * unit + 0.5 < fresnel(from_index, to_index, down ? uz : -uz)) {
            uz = -uz;
            continue;
          }
          double ratio = from_index / to_index;
          ux *= ratio;
          uy *= ratio;
          double sine2 = ux * ux + uy * uy;
          uz = sine2 < 1 ? sqrt(1 - sine2) : 1e-12;
          if (!down) uz = -uz;
        }
        if (next < 0) {
          tally->reflected += weight;
          goto done;
        }
        if (next == plan->layers) {
          tally->transmitted += weight;
          goto done;
        }
        layer = next;
      }
      double absorbed = weight * share;
      absorbed_here += absorbed;
      weight -= absorbed;
      if (weight < 1e-3) {
        if (!(weight > 0)) break;
        if (next_word(random) * unit + 0.5 >= 0.1) {
          tally->roulette_gain -= weight;
          break;
        }
        tally->roulette_gain += weight * 9;
        weight *= 10;
      }
      if (++steps > 1000000) {
        tally->abandoned += weight;
        break;
      }
      double cosine, draw = next_word(random) * unit + 0.5 + unit / 2;
      if (g == 0) cosine = 2 * draw - 1;
      else {
        double term = over / (under + slope * draw);
        cosine = (sum - term * term) * scale;
      }
      double a, b;
      {
        int32_t word = next_word(random);
        int sector = word & 255;
        double turn = ((double)(int32_t)((uint32_t)word >> 8) + 0.5 - 8388608) * turn_unit, square = turn * turn;
        double sin_turn = turn * (1 - square / 6);
        double cos_turn = 1 - square * (0.5 - square / 24);
        double sine = sqrt(fmax(0, 1 - cosine * cosine));
        a = sine * (cosines[sector] * cos_turn - sines[sector] * sin_turn);
        b = sine * (sines[sector] * cos_turn + cosines[sector] * sin_turn);
      }
      double sign = uz >= 0 ? 1 : -1, p = -1 / (sign + uz), q = ux * uy * p;
      double nx = a * (1 + sign * ux * ux * p) + b * q + cosine * ux;
      double ny = a * sign * q + b * (sign + uy * uy * p) + cosine * uy;
      uz = -a * sign * ux - b * uy + cosine * uz;
      ux = nx;
      uy = ny;
    }
  done:;
  }
  if (loaded >= 0) tally->absorbed[loaded] += absorbed_here;
}

int main(int argc, char **argv) {
  long photons = argc > 1 ? atol(argv[1]) : 100000;
  static plan_t plan;
  static tally_t tally;
  const double depths[BINS] = {0, 0.05, 0.1, 0.2, 0.5}, half = 0.0005, radii[RINGS] = {0.1, 0.3, 1};
  plan.layers = 1;
  plan.bottoms[0] = 1000;
  plan.interaction[0] = 101;
  plan.absorbed_share[0] = 1.0 / 101;
  plan.anisotropy[0] = 0.9;
  plan.index[0] = plan.index[2] = 1;
  plan.index[1] = 1.4;
  plan.specular = pow(0.4 / 2.4, 2);
  plan.deepest = depths[BINS - 1] + half;
  plan.depth_cells_per_cm = CELLS / plan.deepest;
  plan.ring_cells_per_cm = CELLS / radii[RINGS - 1];
  for (int i = 0; i < BINS; i++) {
    plan.bin_upper[i] = i ? depths[i] - half : 0;
    plan.bin_lower[i] = depths[i] + half;
  }
  plan.bin_upper[BINS] = plan.bin_lower[BINS] = INFINITY;
  for (int i = 0; i < RINGS; i++) plan.ring_radius[i] = radii[i];
  for (int i = 0; i <= CELLS; i++) {
    while (plan.first_bin[i] < BINS && plan.bin_lower[plan.first_bin[i]] <= i / plan.depth_cells_per_cm) plan.first_bin[i]++;
    while (plan.first_ring[i] < RINGS - 1 && radii[plan.first_ring[i]] <= i / plan.ring_cells_per_cm) plan.first_ring[i]++;
  }
  make_ziggurat();
  uint32_t seed[4] = {0x9e3779b9u, 0x243f6a88u, 0xb7e15162u, 0x2545f491u};
  clock_t start = clock();
  walk_photons(&plan, seed, photons, &tally);
  double seconds = (double)(clock() - start) / CLOCKS_PER_SEC;
  printf("{\"photonsPerS\": %.0f, \"diffuseReflectance\": %.6f}\n", photons / seconds, tally.reflected / photons);
  return 0;
}
