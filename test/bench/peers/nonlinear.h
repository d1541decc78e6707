/* The two problems of test/bench/rosenbrockProblems.ts, and the frame that every peer in C is timed in. */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#define LARGEST 4

typedef struct {
  const char *name;
  int size;
  void (*derivative)(const double *y, double *out);
  /* row-major */
  void (*jacobian)(const double *y, double *out);
  double initial[LARGEST];
  double dose, every;
  int doses, compared;
} Problem;

static void saturable_derivative(const double *y, double *out) {
  double absorbed = 1.1 * y[0];
  double exchanged = 5 * y[1] - 0.5 * y[2];
  double eliminated = y[1] > 0 ? 18 * y[1] / (50 + y[1]) : 0.36 * y[1];
  out[0] = -absorbed;
  out[1] = absorbed - exchanged - eliminated;
  out[2] = exchanged;
}

static void saturable_jacobian(const double *y, double *out) {
  double sum = 50 + y[1];
  double slope = y[1] > 0 ? 900 / (sum * sum) : 0.36;
  const double entries[9] = {-1.1, 0, 0, 1.1, -5 - slope, 0.5, 0, 5, -0.5};
  memcpy(out, entries, sizeof entries);
}

static void target_derivative(const double *y, double *out) {
  double exchanged = 0.007 * y[0] - 0.01 * y[1];
  double bound = 10.0 / 3 * y[0] * y[2] - 0.5 * y[3];
  out[0] = -exchanged - bound - 0.003 * y[0];
  out[1] = exchanged;
  out[2] = 0.06 - bound - 0.02 * y[2];
  out[3] = bound - 0.005 * y[3];
}

static void target_jacobian(const double *y, double *out) {
  double by_drug = 10.0 / 3 * y[2];
  double by_target = 10.0 / 3 * y[0];
  const double entries[16] = {-0.007 - by_drug - 0.003, 0.01, -by_target, 0.5, 0.007, -0.01, 0, 0, -by_drug, 0,
                              -by_target - 0.02, 0.5, by_drug, 0, by_target, -0.505};
  memcpy(out, entries, sizeof entries);
}

static const Problem PROBLEMS[] = {
    {"saturable", 3, saturable_derivative, saturable_jacobian, {0, 0, 0}, 180, 12, 28, 1},
    {"target-mediated", 4, target_derivative, target_jacobian, {0, 0, 3, 0}, 30, 336, 6, 0},
};

/* What a peer provides: carry y over one interval. */
static void peer_begin(const Problem *problem, double relative, double absolute);
static void peer_advance(double *y, double duration);

/* PROBLEM RELATIVE REPEATS: prints microseconds of processor time a solve, then what is compared at the end of every interval. */
int main(int argc, char **argv) {
  if (argc != 4) return 1;
  const Problem *problem = strcmp(argv[1], PROBLEMS[0].name) == 0 ? &PROBLEMS[0] : &PROBLEMS[1];
  double relative = atof(argv[2]);
  int repeats = atoi(argv[3]);
  double y[LARGEST], ends[64];
  struct timespec from, to;
  peer_begin(problem, relative, 1e-3 * relative * problem->dose);
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &from);
  for (int repeat = 0; repeat < repeats; repeat++) {
    memcpy(y, problem->initial, sizeof y);
    for (int k = 0; k < problem->doses; k++) {
      y[0] += problem->dose;
      peer_advance(y, problem->every);
      ends[k] = y[problem->compared];
    }
  }
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &to);
  printf("%.6g", ((to.tv_sec - from.tv_sec) * 1e9 + (to.tv_nsec - from.tv_nsec)) / 1e3 / repeats);
  for (int k = 0; k < problem->doses; k++) printf(" %.17g", ends[k]);
  printf("\n");
  return 0;
}
