/* Runs on each side of a threshold in a record of 16-bit counts: number by length up to 64 bins, longest, bins.
 * Arguments: bins, threshold, repeats. The record is the one of threshold.ts: levels 10 and 100 counts, dwells with
 * survival m^-1/2 up to 65536 bins, noise from the sum of four bytes of a 32-bit xorshift generator (Marsaglia 2003).
 * Prints the best time of the branching loop, ms; of the loop on words of 64 comparisons, ms; and a checksum. */
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

static uint32_t state = 2463534242u;
static uint32_t next_word(void) {
  state ^= state << 13;
  state ^= state >> 17;
  state ^= state << 5;
  return state;
}

static double now_ms(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return 1e3 * t.tv_sec + 1e-6 * t.tv_nsec;
}

typedef struct {
  uint32_t count[2][65];
  uint64_t bins[2];
  uint32_t longest[2];
} tally;

static void add(tally *t, int on, uint32_t m) {
  t->count[on][m <= 64 ? m - 1 : 64]++;
  t->bins[on] += m;
  if (m > t->longest[on]) t->longest[on] = m;
}

static __attribute__((noinline)) void branching(const uint16_t *v, size_t n, uint16_t c, tally *t) {
  size_t begun = 0;
  int on = v[0] >= c;
  for (size_t i = 1; i < n; i++) {
    int now = v[i] >= c;
    if (now != on) {
      add(t, on, (uint32_t)(i - begun));
      begun = i;
      on = now;
    }
  }
  add(t, on, (uint32_t)(n - begun));
}

static __attribute__((noinline)) void by_words(const uint16_t *v, size_t n, uint16_t c, tally *t) {
  size_t begun = 0;
  int on = v[0] >= c;
  uint64_t before = (uint64_t)on;
  size_t i = 0;
  for (; i + 64 <= n; i += 64) {
    uint64_t mask = 0;
    uint8_t flags[64];
    for (int j = 0; j < 64; j++) flags[j] = v[i + j] >= c;
    for (int j = 0; j < 8; j++) {
      uint64_t eight;
      memcpy(&eight, flags + 8 * j, 8);
      mask |= ((eight * 0x0102040810204080ull) >> 56) << (8 * j);
    }
    uint64_t changes = mask ^ ((mask << 1) | before);
    before = mask >> 63;
    while (changes) {
      size_t at = i + (size_t)__builtin_ctzll(changes);
      changes &= changes - 1;
      add(t, on, (uint32_t)(at - begun));
      begun = at;
      on ^= 1;
    }
  }
  for (; i < n; i++)
    if ((v[i] >= c) != on) {
      add(t, on, (uint32_t)(i - begun));
      begun = i;
      on ^= 1;
    }
  add(t, on, (uint32_t)(n - begun));
}

static uint64_t checksum(const tally *t) {
  uint64_t sum = 0;
  for (int on = 0; on < 2; on++) {
    for (int m = 0; m < 65; m++) sum = (sum * 31 + t->count[on][m]) % 1000000007ull;
    sum = (sum * 31 + t->bins[on]) % 1000000007ull;
    sum = (sum * 31 + t->longest[on]) % 1000000007ull;
  }
  return sum;
}

int main(int argc, char **argv) {
  if (argc < 4) return 1;
  size_t n = (size_t)atof(argv[1]);
  uint16_t c = (uint16_t)atoi(argv[2]);
  int repeats = atoi(argv[3]);
  uint16_t *v = malloc(n * sizeof *v);
  if (!v) return 1;
  int on = 0;
  size_t left = 0;
  for (size_t i = 0; i < n; i++) {
    if (left == 0) {
      double u = ((next_word() >> 8) + 1) / 16777216.0;
      left = u * u * 65536 < 1 ? 65536 : (size_t)(1 / (u * u));
      on ^= 1;
    }
    left--;
    uint32_t w = next_word();
    uint32_t noise = (w & 255) + ((w >> 8) & 255) + ((w >> 16) & 255) + (w >> 24);
    v[i] = (uint16_t)(on ? 66 + noise / 15 : noise / 51);
  }
  double best[2] = {1e300, 1e300};
  uint64_t sums[2] = {0, 0};
  void (*loops[2])(const uint16_t *, size_t, uint16_t, tally *) = {branching, by_words};
  for (int r = 0; r < repeats; r++)
    for (int k = 0; k < 2; k++) {
      tally t;
      memset(&t, 0, sizeof t);
      double start = now_ms();
      loops[k](v, n, c, &t);
      double took = now_ms() - start;
      if (took < best[k]) best[k] = took;
      sums[k] = checksum(&t);
    }
  if (sums[0] != sums[1]) return 2;
  printf("%.4f %.4f %llu\n", best[0], best[1], (unsigned long long)sums[0]);
  return 0;
}
