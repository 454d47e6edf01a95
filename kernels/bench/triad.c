/*
 * Yardstick: the memory's bandwidth, by a[i] = b[i] + s·c[i] over arrays far larger than the caches. A sweep that reads and writes
 * three fields once moves 24 bytes a cell and step: GB/s / 24 is the most that a solver reaches which takes one step a sweep.
 *
 *   gcc -O3 -march=native -fopenmp -o triad triad.c && ./triad
 *
 * One JSON line for each number of threads, 1, 2, 4 …: {"threads": …, "gbs": best of six}.
 */
#include <omp.h>
#include <stdio.h>
#include <stdlib.h>

int main(void) {
  size_t n = (size_t)64 << 20;
  float *a = aligned_alloc(64, n * 4), *b = aligned_alloc(64, n * 4), *c = aligned_alloc(64, n * 4);
#pragma omp parallel for
  for (size_t i = 0; i < n; i++) {
    a[i] = 1;
    b[i] = 2;
    c[i] = 3;
  }
  for (int threads = 1; threads <= omp_get_num_procs(); threads *= 2) {
    double best = 0;
    for (int r = 0; r < 6; r++) {
      double t = omp_get_wtime();
#pragma omp parallel for num_threads(threads)
      for (size_t i = 0; i < n; i++) a[i] = b[i] + 0.5f * c[i];
      double rate = 12.0 * n / (omp_get_wtime() - t) / 1e9;
      if (rate > best) best = rate;
    }
    printf("{\"threads\":%d,\"gbs\":%.1f}\n", threads, best);
  }
  return a[7] > 0 ? 0 : 1;
}
