/*
 * Rival of core/photons/bin-photons.ts: the same arrival times, binned in C.
 * Usage: binning PHOTONS MEAN_GAP_TICKS BIN_TICKS REPEATS
 * Each time covers the whole job: counts set to zero, photons counted, counts narrowed to 16 bits when they fit.
 * Prints: best milliseconds of the division loop, of the multiplication loop, of the edge-striding loop, and a checksum.
 */
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#define CHUNK (1 << 20)

static uint32_t *counts;
static uint64_t bins;

static double now_ms(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return t.tv_sec * 1e3 + t.tv_nsec / 1e6;
}

/* The loop anyone would write: one division and one increment a photon. */
static void by_division(const uint32_t *o, uint32_t n, uint64_t base, uint32_t bin) {
  uint64_t first = base / bin;
  uint32_t phase = (uint32_t)(base % bin);
  for (uint32_t i = 0; i < n; i++) counts[first + ((uint64_t)o[i] + phase) / bin]++;
}

/* One multiplication and one increment a photon. */
static void by_product(const uint32_t *o, uint32_t n, uint64_t base, uint32_t bin) {
  int32_t first = (int32_t)(base / bin);
  double shift = (double)(base % bin) + 0.5, per = 1.0 / bin;
  for (uint32_t i = 0; i < n; i++) counts[first + (int32_t)((o[i] + shift) * per)]++;
}

/* Stride to each bin edge 16 photons at a time, then halve. */
static void by_edges(const uint32_t *o, uint32_t n, uint64_t base, uint32_t bin) {
  int64_t place = 0, last = (int64_t)n - 16;
  uint64_t k = (base + o[0]) / bin;
  while (place < n) {
    int64_t edge = (int64_t)((k + 1) * bin - base), begin = place;
    while (place <= last && (int64_t)o[place + 15] < edge) place += 16;
    if (place <= last) {
      if ((int64_t)o[place + 7] < edge) place += 8;
      if ((int64_t)o[place + 3] < edge) place += 4;
      if ((int64_t)o[place + 1] < edge) place += 2;
      if ((int64_t)o[place] < edge) place += 1;
    } else
      while (place < n && (int64_t)o[place] < edge) place++;
    counts[k] += (uint32_t)(place - begin);
    k++;
    if (place == begin && place < n) k = (base + o[place]) / bin;
  }
}

typedef void (*loop)(const uint32_t *, uint32_t, uint64_t, uint32_t);

int main(int argc, char **argv) {
  if (argc != 5) return 2;
  uint64_t photons = strtoull(argv[1], 0, 10);
  uint32_t gap = (uint32_t)atoi(argv[2]), bin = (uint32_t)atoi(argv[3]), repeats = (uint32_t)atoi(argv[4]);
  uint32_t *offsets = malloc(photons * sizeof *offsets);
  uint64_t chunks = (photons + CHUNK - 1) / CHUNK;
  uint64_t *base = malloc(chunks * sizeof *base);
  uint32_t x = 2463534242u;
  uint64_t tick = 0;
  for (uint64_t i = 0; i < photons; i++) {
    x ^= x << 13;
    x ^= x >> 17;
    x ^= x << 5;
    tick += x % (2 * gap);
    if (i % CHUNK == 0) base[i / CHUNK] = tick;
    offsets[i] = (uint32_t)(tick - base[i / CHUNK]);
  }
  bins = tick / bin + 1;
  loop loops[3] = {by_division, by_product, by_edges};
  uint64_t sums[3];
  for (int l = 0; l < 3; l++) {
    double best = 1e99;
    for (uint32_t r = 0; r < repeats; r++) {
      double start = now_ms();
      counts = calloc(bins, sizeof *counts);
      for (uint64_t c = 0; c < chunks; c++) {
        uint64_t from = c * CHUNK, n = photons - from < CHUNK ? photons - from : CHUNK;
        loops[l](offsets + from, (uint32_t)n, base[c], bin);
      }
      uint32_t bits = 0;
      for (uint64_t k = 0; k < bins; k++) bits |= counts[k];
      uint16_t *narrow = bits >> 16 ? 0 : malloc(bins * sizeof *narrow);
      if (narrow)
        for (uint64_t k = 0; k < bins; k++) narrow[k] = (uint16_t)counts[k];
      double took = now_ms() - start;
      if (took < best) best = took;
      sums[l] = 0;
      for (uint64_t k = 0; k < bins; k++)
        sums[l] = (sums[l] + (narrow ? narrow[k] : counts[k]) * (k % 1009)) % 1000000007u;
      free(narrow);
      free(counts);
    }
    printf("%.3f ", best);
  }
  printf("%llu\n", (unsigned long long)(sums[0] == sums[1] && sums[1] == sums[2] ? sums[0] : 0));
  return 0;
}
