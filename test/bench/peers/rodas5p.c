/* The integrator of src/numerics/rosenbrock.ts, the same step for step, in C. Coefficients: build/rodas5p.h, written by
   the benchmark from src/numerics/rodas5p.ts. */
#include "nonlinear.h"
#include "build/rodas5p.h"
#include <math.h>

static const Problem *system_of;
static double rtol, atol_all;
static int n;
static double f0[LARGEST], jac[LARGEST * LARGEST], w[LARGEST * LARGEST];
static double k1[LARGEST], k2[LARGEST], k3[LARGEST], k4[LARGEST], k5[LARGEST], k6[LARGEST], k7[LARGEST], k8[LARGEST];
static double next[LARGEST];
static int pivots[LARGEST];

static void peer_begin(const Problem *problem, double relative, double absolute) {
  system_of = problem;
  n = problem->size;
  rtol = fmin(1e-4, fmax(1e-14, relative));
  atol_all = absolute;
}

static int factor(double h) {
  for (int p = 0; p < n * n; p++) w[p] = -G * h * jac[p];
  for (int i = 0; i < n; i++) w[i * n + i] += 1;
  for (int k = 0; k < n; k++) {
    int pivot = k;
    double largest = fabs(w[k * n + k]);
    for (int i = k + 1; i < n; i++) {
      if (fabs(w[i * n + k]) > largest) {
        largest = fabs(w[i * n + k]);
        pivot = i;
      }
    }
    pivots[k] = pivot;
    if (!(largest > 0 && largest < INFINITY)) return 0;
    if (pivot != k) {
      for (int j = 0; j < n; j++) {
        double kept = w[k * n + j];
        w[k * n + j] = w[pivot * n + j];
        w[pivot * n + j] = kept;
      }
    }
    double reciprocal = 1 / w[k * n + k];
    w[k * n + k] = reciprocal;
    for (int i = k + 1; i < n; i++) {
      double multiplier = w[i * n + k];
      if (multiplier == 0) continue;
      double scaled = multiplier * reciprocal;
      w[i * n + k] = scaled;
      for (int j = k + 1; j < n; j++) w[i * n + j] -= scaled * w[k * n + j];
    }
  }
  return 1;
}

static void solve(double *v) {
  for (int k = 0; k < n; k++) {
    if (pivots[k] != k) {
      double kept = v[k];
      v[k] = v[pivots[k]];
      v[pivots[k]] = kept;
    }
  }
  for (int i = 1; i < n; i++) {
    double sum = v[i];
    for (int j = 0; j < i; j++) sum -= w[i * n + j] * v[j];
    v[i] = sum;
  }
  for (int i = n - 1; i >= 0; i--) {
    double sum = v[i];
    for (int j = i + 1; j < n; j++) sum -= w[i * n + j] * v[j];
    v[i] = sum * w[i * n + i];
  }
}

static void take(const double *y, double h) {
  double s[LARGEST], f[LARGEST];
  double gh = G * h;
  for (int i = 0; i < n; i++) k1[i] = gh * f0[i];
  solve(k1);
  for (int i = 0; i < n; i++) s[i] = y[i] + A21 * k1[i];
  system_of->derivative(s, f);
  for (int i = 0; i < n; i++) k2[i] = gh * f[i] + C21 * k1[i];
  solve(k2);
  for (int i = 0; i < n; i++) s[i] = y[i] + A31 * k1[i] + A32 * k2[i];
  system_of->derivative(s, f);
  for (int i = 0; i < n; i++) k3[i] = gh * f[i] + C31 * k1[i] + C32 * k2[i];
  solve(k3);
  for (int i = 0; i < n; i++) s[i] = y[i] + A41 * k1[i] + A42 * k2[i] + A43 * k3[i];
  system_of->derivative(s, f);
  for (int i = 0; i < n; i++) k4[i] = gh * f[i] + C41 * k1[i] + C42 * k2[i] + C43 * k3[i];
  solve(k4);
  for (int i = 0; i < n; i++) s[i] = y[i] + A51 * k1[i] + A52 * k2[i] + A53 * k3[i] + A54 * k4[i];
  system_of->derivative(s, f);
  for (int i = 0; i < n; i++) k5[i] = gh * f[i] + C51 * k1[i] + C52 * k2[i] + C53 * k3[i] + C54 * k4[i];
  solve(k5);
  for (int i = 0; i < n; i++) s[i] = y[i] + A61 * k1[i] + A62 * k2[i] + A63 * k3[i] + A64 * k4[i] + A65 * k5[i];
  system_of->derivative(s, f);
  for (int i = 0; i < n; i++)
    k6[i] = gh * f[i] + C61 * k1[i] + C62 * k2[i] + C63 * k3[i] + C64 * k4[i] + C65 * k5[i];
  solve(k6);
  for (int i = 0; i < n; i++) s[i] += k6[i];
  system_of->derivative(s, f);
  for (int i = 0; i < n; i++)
    k7[i] = gh * f[i] + C71 * k1[i] + C72 * k2[i] + C73 * k3[i] + C74 * k4[i] + C75 * k5[i] + C76 * k6[i];
  solve(k7);
  for (int i = 0; i < n; i++) s[i] += k7[i];
  system_of->derivative(s, f);
  for (int i = 0; i < n; i++)
    k8[i] = gh * f[i] + C81 * k1[i] + C82 * k2[i] + C83 * k3[i] + C84 * k4[i] + C85 * k5[i] + C86 * k6[i] +
            C87 * k7[i];
  solve(k8);
  for (int i = 0; i < n; i++) next[i] = s[i] + k8[i];
}

static double attempt(const double *y, double h) {
  if (!factor(h)) return INFINITY;
  take(y, h);
  double sum = 0;
  for (int i = 0; i < n; i++) {
    if (next[i] < -10 * atol_all) return INFINITY;
    if (k8[i] == 0) continue;
    double scaled = k8[i] / (atol_all + rtol * fmax(fabs(y[i]), fabs(next[i])));
    sum += scaled * scaled;
  }
  return sum < INFINITY ? sqrt(sum / n) : INFINITY;
}

static double fifth_root(double x) {
  double eighth = sqrt(sqrt(sqrt(x)));
  return eighth * sqrt(eighth);
}

static double first_step(const double *y, double duration) {
  double fastest = 0, first = 0, second = 0;
  for (int i = 0; i < n; i++) fastest = fmax(fastest, fabs(jac[i * n + i]));
  double trial = fastest * duration > 1 ? 1 / fastest : duration;
  for (int i = 0; i < n; i++) {
    double weight = atol_all + rtol * (fabs(y[i]) + trial * fabs(f0[i]));
    double change = 0;
    for (int j = 0; j < n; j++) change += jac[i * n + j] * f0[j];
    if (f0[i] != 0) first += f0[i] / weight * (f0[i] / weight);
    if (change != 0 && weight > 0) second += change / weight * (change / weight);
  }
  double d1 = sqrt(first / n), d2 = sqrt(second / n);
  double step = pow(d2 / d1 / d1, 1.0 / 6) * d1 / d2;
  return step > 0 && step < duration ? step : duration;
}

static void peer_advance(double *y, double duration) {
  system_of->derivative(y, f0);
  system_of->jacobian(y, jac);
  double time = 0, h = first_step(y, duration), last_step = 0, last_error = 0;
  int in_a_row = 0;
  while (time < duration) {
    double remaining = duration - time;
    int is_last = h >= remaining * (1 - 1e-9);
    if (is_last) h = remaining;
    else if (2 * h > remaining) h = 0.5 * remaining;
    double error = attempt(y, h);
    if (!(error <= 1)) {
      h *= error < INFINITY ? fmax(0.2, 0.9 * fifth_root(1 / error)) : 0.25;
      in_a_row++;
      continue;
    }
    time = is_last ? duration : time + h;
    memcpy(y, next, n * sizeof *y);
    double inverse = error;
    if (last_step > 0) {
      double ratio = h / last_step;
      inverse = fmax(error, error * error / (last_error * ratio * ratio * ratio * ratio * ratio));
    }
    last_step = h;
    last_error = fmax(1e-2, error);
    h *= fmax(0.2, fmin(in_a_row > 0 ? 1 : 6, 0.9 * fifth_root(1 / fmax(inverse, 1e-6))));
    in_a_row = 0;
    if (time < duration) {
      system_of->derivative(y, f0);
      system_of->jacobian(y, jac);
    }
  }
}
