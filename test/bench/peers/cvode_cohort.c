/*
 * The cohort of test/bench/exponentialModels.ts by SUNDIALS CVODE (BDF, dense, analytic Jacobian, relative tolerance
 * 1e-6), started afresh at each dose:
 *   gcc -O3 -march=native cvode_cohort.c -lsundials_cvode -lsundials_nvecserial -lsundials_sunmatrixdense
 *     -lsundials_sunlinsoldense -lm -o cvode_cohort
 *   ./cvode_cohort PATIENTS            prints patients a second and the sum of two levels of each
 */
#define _POSIX_C_SOURCE 199309L
#include <cvode/cvode.h>
#include <nvector/nvector_serial.h>
#include <stdio.h>
#include <stdlib.h>
#include <sunlinsol/sunlinsol_dense.h>
#include <sunmatrix/sunmatrix_dense.h>
#include <time.h>

#define N 4

static double k[N][N];

static int right_side(realtype t, N_Vector x, N_Vector slope, void *data) {
  (void)t, (void)data;
  double *from = N_VGetArrayPointer(x), *to = N_VGetArrayPointer(slope);
  for (int i = 0; i < N; i++) {
    to[i] = 0;
    for (int j = 0; j < N; j++) to[i] += k[i][j] * from[j];
  }
  return 0;
}

static int jacobian(realtype t, N_Vector x, N_Vector f, SUNMatrix j, void *data, N_Vector a, N_Vector b, N_Vector c) {
  (void)t, (void)x, (void)f, (void)data, (void)a, (void)b, (void)c;
  for (int row = 0; row < N; row++)
    for (int column = 0; column < N; column++) SM_ELEMENT_D(j, row, column) = k[row][column];
  return 0;
}

static unsigned state = 20261;
static double uniform(void) {
  state = state * 1664525u + 1013904223u;
  return state / 4294967296.0;
}

static void model(void) {
  double scale[4];
  for (int i = 0; i < 4; i++) scale[i] = 0.5 + uniform();
  for (int i = 0; i < N; i++)
    for (int j = 0; j < N; j++) k[i][j] = 0;
  k[1][0] = 0.9 * scale[0];
  for (int i = 2; i < N; i++) {
    k[i][1] = 0.5 / (i - 1) * scale[2];
    k[1][i] = 0.2 / (i - 1) * scale[3];
  }
  for (int j = 0; j < N; j++) {
    double out = j == 1 ? 0.1 * scale[1] : 0;
    for (int i = 0; i < N; i++)
      if (i != j) out += k[i][j];
    k[j][j] = -out;
  }
}

int main(int count, char **words) {
  if (count < 2) return 1;
  long amount = atol(words[1]);
  SUNContext context;
  SUNContext_Create(NULL, &context);
  N_Vector x = N_VNew_Serial(N, context);
  SUNMatrix matrix = SUNDenseMatrix(N, N, context);
  SUNLinearSolver solver = SUNLinSol_Dense(x, matrix, context);
  void *cvode = CVodeCreate(CV_BDF, context);
  double *amounts = N_VGetArrayPointer(x), checksum = 0, level[337];
  CVodeInit(cvode, right_side, 0, x);
  CVodeSStolerances(cvode, 1e-6, 1e-6);
  CVodeSetLinearSolver(cvode, solver, matrix);
  CVodeSetJacFn(cvode, jacobian);
  CVodeSetMaxNumSteps(cvode, 100000);
  struct timespec start, end;
  clock_gettime(CLOCK_MONOTONIC, &start);
  for (long patient = 0; patient < amount; patient++) {
    model();
    for (int i = 0; i < N; i++) amounts[i] = 0;
    for (int hour = 0; hour <= 336; hour++) {
      level[hour] = amounts[1] / 20;
      if (hour == 336) break;
      if (hour % 12 == 0) {
        amounts[0] += 500;
        CVodeReInit(cvode, hour, x);
        CVodeSetStopTime(cvode, hour + 12);
      }
      realtype reached;
      if (CVode(cvode, hour + 1, x, &reached, CV_NORMAL) < 0) return 2;
    }
    checksum += level[336] + level[100];
  }
  clock_gettime(CLOCK_MONOTONIC, &end);
  printf("%.17g %.17g\n", amount / (end.tv_sec - start.tv_sec + 1e-9 * (end.tv_nsec - start.tv_nsec)), checksum);
  return 0;
}
