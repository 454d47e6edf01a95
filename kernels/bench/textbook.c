/*
 * Yardstick: the two-loop leapfrog update of textbooks (TMz, with loss, one array for each coefficient) as a C compiler makes it,
 * on one thread. No absorbing layers, no sources, no probes: less work than a run of the same size.
 *
 *   gcc -O3 -march=native -ffast-math -o textbook textbook.c && ./textbook 512 2048
 *
 * One JSON line for each size: {"n": cells along each side, "mcells": million cell-steps a second, best of three}.
 */
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

static double now(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return t.tv_sec + 1e-9 * t.tv_nsec;
}

static void update_h(float *restrict hx, float *restrict hy, const float *restrict ez,
                     const float *restrict dax, const float *restrict dbx,
                     const float *restrict day, const float *restrict dby, int n) {
  for (int j = 0; j < n - 1; j++)
    for (int i = 0; i < n - 1; i++) {
      size_t k = (size_t)j * n + i;
      hx[k] = dax[k] * hx[k] - dbx[k] * (ez[k + n] - ez[k]);
      hy[k] = day[k] * hy[k] + dby[k] * (ez[k + 1] - ez[k]);
    }
}

static void update_e(float *restrict ez, const float *restrict hx, const float *restrict hy,
                     const float *restrict ca, const float *restrict cb, int n) {
  for (int j = 1; j < n - 1; j++)
    for (int i = 1; i < n - 1; i++) {
      size_t k = (size_t)j * n + i;
      ez[k] = ca[k] * ez[k] + cb[k] * ((hy[k] - hy[k - 1]) - (hx[k] - hx[k - n]));
    }
}

int main(int argc, char **argv) {
  for (int q = 1; q < argc; q++) {
    int n = atoi(argv[q]);
    size_t cells = (size_t)n * n;
    int steps = (int)(4e8 / cells) < 20 ? 20 : (int)(4e8 / cells);
    float *a[9];
    for (int m = 0; m < 9; m++) {
      a[m] = aligned_alloc(64, cells * sizeof(float));
      for (size_t k = 0; k < cells; k++)
        a[m][k] = m < 3 ? 1e-3f * (float)(k % 97) : (m & 1 ? 0.999f : 0.45f);
    }
    double best = 0;
    for (int r = 0; r < 3; r++) {
      double t = now();
      for (int s = 0; s < steps; s++) {
        update_h(a[1], a[2], a[0], a[3], a[4], a[5], a[6], n);
        update_e(a[0], a[1], a[2], a[7], a[8], n);
      }
      double rate = cells * (double)steps / (now() - t) / 1e6;
      if (rate > best) best = rate;
    }
    /* The field goes into the line, so that no compiler drops the work. */
    printf("{\"n\":%d,\"mcells\":%.0f,\"check\":%g}\n", n, best, a[0][cells / 2]);
    for (int m = 0; m < 9; m++) free(a[m]);
  }
  return 0;
}
