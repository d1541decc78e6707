/*
 * The exponential of src/numerics/linearOperators.ts in C, for comparison: same plan, same series, same doublings, one
 * functional row besides the sink and one input column. Compiled once for every number of compartments:
 *   gcc -O3 -march=native -DN=3 expm.c -lm -o expm3
 *   ./expm3 exponential CALLS          prints nanoseconds a call and a checksum
 *   ./expm4 cohort PATIENTS            prints patients a second and a checksum
 * The models are those of test/bench/exponentialModels.ts.
 */
#define _POSIX_C_SOURCE 199309L
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#ifndef N
#define N 3
#endif
#ifndef F
#define F 2 /* sink, area; a cohort takes the sink alone */
#endif

static double shifted[N][N], weights[F][N], gaps[F], decays[F], sigma;
static double block[N + F][N], next[N + F][N], column[N], direct[F];
static double powers[5][N][N];

static void use(double between[N][N], const double out[N], double weight) {
  double outflow[N];
  sigma = 0;
  for (int j = 0; j < N; j++) {
    outflow[j] = out[j];
    for (int i = 0; i < N; i++) outflow[j] += between[i][j];
    if (outflow[j] > sigma) sigma = outflow[j];
    weights[0][j] = out[j];
    for (int r = 1; r < F; r++) weights[r][j] = j == 1 ? weight : 0;
  }
  for (int r = 0; r < F; r++) {
    decays[r] = 0;
    gaps[r] = sigma;
  }
  memcpy(shifted, between, sizeof shifted);
  for (int j = 0; j < N; j++) shifted[j][j] = sigma - outflow[j];
}

static const int degrees[] = {4, 6, 9, 12, 16}, strides[] = {2, 3, 3, 4, 4};
static const double inverse_factorial[] = {
    1.0, 1.0, 1.0 / 2, 1.0 / 6, 1.0 / 24, 1.0 / 120, 1.0 / 720, 1.0 / 5040, 1.0 / 40320, 1.0 / 362880, 1.0 / 3628800,
    1.0 / 39916800, 1.0 / 479001600, 1.0 / 6227020800, 1.0 / 87178291200, 1.0 / 1307674368000, 1.0 / 20922789888000};

static void plan(double scale, int *degree, int *stride, int *squarings) {
  static const double weight[] = {1e17 / 120, 1e17 / 5040, 1e17 / 3628800, 1e17 / 6227020800, 1e17 / 355687428096000};
  double product = 1, cheapest = INFINITY;
  int factors = 0, bits = 0;
  for (int d = 0; d < 5; d++) {
    int m = degrees[d], s = 0, left = 0;
    for (; factors <= m; factors++) {
      int above = N + 1 - factors;
      product *= scale + (above > 0 ? above : 0);
      while (product > 18446744073709551616.0) product /= 18446744073709551616.0, bits += 64;
    }
    double excess = product * weight[d], shrink = ldexp(1, -m);
    for (left = bits; left >= m; left -= m) s++;
    for (; left > 0; left--) excess *= 2;
    for (; excess > 1; excess *= shrink) s++;
    double cost = strides[d] - 1 + 2.5 * (m / strides[d] - 1) + 1.7 * s;
    if (cost < cheapest) cheapest = cost, *degree = m, *stride = strides[d], *squarings = s;
  }
}

static void product(int rows, double a[][N], double b[N][N], double c[][N]) {
  for (int i = 0; i < rows; i++)
    for (int j = 0; j < N; j++) {
      double sum = 0;
      for (int k = 0; k < N; k++) sum += a[i][k] * b[k][j];
      c[i][j] = sum;
    }
}

static void balance(void) {
  for (int j = 0; j < N; j++) {
    double sum = 0;
    for (int i = 0; i <= N; i++) sum += block[i][j];
    double factor = 1 / sum;
    for (int i = 0; i <= N; i++) block[i][j] *= factor;
  }
}

static void series(double step, int m, int stride, int input) {
  double work[N][N], terms[F][N], products[F][N], sources[F][N], mus[F], row_powers[F], c[N], c2[N], h[F];
  for (int i = 0; i < N; i++)
    for (int j = 0; j < N; j++) powers[1][i][j] = shifted[i][j] * step;
  for (int k = 1; k < stride; k++) product(N, powers[k], powers[1], powers[k + 1]);
  for (int i = 0; i < N; i++)
    for (int j = 0; j < N; j++) work[i][j] = inverse_factorial[m] * powers[stride][i][j];
  for (int lowest = m - stride; lowest >= 0; lowest -= stride) {
    for (int i = 0; i < N; i++) work[i][i] += inverse_factorial[lowest];
    for (int k = 1; k < stride; k++)
      for (int i = 0; i < N; i++)
        for (int j = 0; j < N; j++) work[i][j] += inverse_factorial[lowest + k] * powers[k][i][j];
    if (lowest == 0) break;
    product(N, work, powers[stride], block);
    memcpy(work, block, sizeof work);
  }
  memcpy(block, work, sizeof work);

  double nu = sigma * step, power = nu;
  for (int r = 0; r < F; r++) {
    mus[r] = row_powers[r] = gaps[r] * step;
    direct[r] = h[r] = 0;
    for (int j = 0; j < N; j++) block[N + r][j] = terms[r][j] = sources[r][j] = weights[r][j] * step;
  }
  for (int j = 0; j < N; j++) column[j] = c[j] = j == input ? step : 0;
  for (int k = 1; k < m; k++) {
    double share = 1.0 / (k + 1);
    for (int r = 0; r < F; r++) {
      double sum = 0;
      for (int j = 0; j < N; j++) sum += sources[r][j] * c[j];
      h[r] = (sum + mus[r] * h[r]) * share;
      direct[r] += h[r];
    }
    for (int i = 0; i < N; i++) {
      double sum = i == input ? power * step : 0;
      for (int j = 0; j < N; j++) sum += powers[1][i][j] * c[j];
      c2[i] = sum * share;
    }
    for (int i = 0; i < N; i++) column[i] += c[i] = c2[i];
    power *= nu * share;
    product(F, terms, powers[1], products);
    for (int r = 0; r < F; r++) {
      for (int j = 0; j < N; j++) {
        terms[r][j] = (products[r][j] + row_powers[r] * sources[r][j]) * share;
        block[N + r][j] += terms[r][j];
      }
      row_powers[r] *= mus[r] * share;
    }
  }
  double damping = exp(-nu);
  for (int i = 0; i < N + F; i++)
    for (int j = 0; j < N; j++) block[i][j] *= damping;
  for (int j = 0; j < N; j++) column[j] *= damping;
  for (int r = 0; r < F; r++) direct[r] *= damping;
}

static void operator_over(double duration, int input) {
  int degree = 4, stride = 2, squarings = 0;
  plan(sigma * duration, &degree, &stride, &squarings);
  double step = ldexp(duration, -squarings);
  series(step, degree, stride, input);
  balance();
  for (int k = 0; k < squarings; k++, step *= 2) {
    product(N + F, block, block, next);
    for (int r = 0; r < F; r++) {
      double decay = exp(-decays[r] * step), sum = 0;
      for (int j = 0; j < N; j++) sum += block[N + r][j] * column[j];
      direct[r] += decay * direct[r] + sum;
      for (int j = 0; j < N; j++) next[N + r][j] += decay * block[N + r][j];
    }
    double sums[N];
    for (int i = 0; i < N; i++) {
      sums[i] = 0;
      for (int j = 0; j < N; j++) sums[i] += block[i][j] * column[j];
    }
    for (int i = 0; i < N; i++) column[i] += sums[i];
    memcpy(block, next, sizeof block);
    balance();
  }
}

static double now(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return t.tv_sec + 1e-9 * t.tv_nsec;
}

/* Depot 0, central 1, the others peripheral; scale 1 is the typical patient. */
static void model(const double scale[4]) {
  static double between[N][N];
  double out[N] = {0};
  memset(between, 0, sizeof between);
  between[1][0] = 0.9 * scale[0];
  out[1] = 0.1 * scale[1];
  for (int i = 2; i < N; i++) {
    between[i][1] = 0.5 / (i - 1) * scale[2];
    between[1][i] = 0.2 / (i - 1) * scale[3];
  }
  use(between, out, 1.0 / 20);
}

static unsigned state = 20261;
static double uniform(void) {
  state = state * 1664525u + 1013904223u;
  return state / 4294967296.0;
}

int main(int count, char **words) {
  if (count < 3) return 1;
  long amount = atol(words[2]);
  double checksum = 0;
  if (strcmp(words[1], "exponential") == 0) {
    double typical[4] = {1, 1, 1, 1};
    model(typical);
    for (long call = 0; call < amount / 10; call++) operator_over(0.5 + call % 7, 1);
    double start = now();
    for (long call = 0; call < amount; call++) {
      operator_over(0.5 + call % 7, 1);
      checksum += block[1][1] + direct[F - 1];
    }
    printf("%.17g %.17g\n", (now() - start) / amount * 1e9, checksum);
  } else {
    static double level[337];
    double start = now();
    for (long patient = 0; patient < amount; patient++) {
      double scale[4], x[N] = {0}, y[N];
      for (int k = 0; k < 4; k++) scale[k] = 0.5 + uniform();
      model(scale);
      operator_over(1, 1);
      for (int hour = 0; hour <= 336; hour++) {
        level[hour] = x[1] / 20;
        if (hour % 12 == 0 && hour < 336) x[0] += 500;
        for (int i = 0; i < N; i++) {
          y[i] = 0;
          for (int j = 0; j < N; j++) y[i] += block[i][j] * x[j];
        }
        memcpy(x, y, sizeof x);
      }
      checksum += level[336] + level[100];
    }
    printf("%.17g %.17g\n", amount / (now() - start), checksum);
  }
  return 0;
}
