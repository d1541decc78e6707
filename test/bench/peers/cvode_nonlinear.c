/* CVODE with backward differentiation, dense direct solver and analytic Jacobian, restarted at each dose. */
#include "nonlinear.h"
#include <cvode/cvode.h>
#include <nvector/nvector_serial.h>
#include <sunlinsol/sunlinsol_dense.h>
#include <sunmatrix/sunmatrix_dense.h>

static const Problem *system_of;
static void *memory;
static N_Vector state;

static int derivative(realtype t, N_Vector y, N_Vector out, void *data) {
  (void)t;
  (void)data;
  system_of->derivative(NV_DATA_S(y), NV_DATA_S(out));
  return 0;
}

static int jacobian(realtype t, N_Vector y, N_Vector f, SUNMatrix out, void *data, N_Vector a, N_Vector b, N_Vector c) {
  (void)t, (void)f, (void)data, (void)a, (void)b, (void)c;
  double entries[LARGEST * LARGEST];
  int n = system_of->size;
  system_of->jacobian(NV_DATA_S(y), entries);
  for (int i = 0; i < n; i++)
    for (int j = 0; j < n; j++) SM_ELEMENT_D(out, i, j) = entries[i * n + j];
  return 0;
}

static void peer_begin(const Problem *problem, double relative, double absolute) {
  system_of = problem;
#if SUNDIALS_VERSION_MAJOR >= 6
  SUNContext context;
  SUNContext_Create(NULL, &context);
  state = N_VNew_Serial(problem->size, context);
  memory = CVodeCreate(CV_BDF, context);
  SUNMatrix matrix = SUNDenseMatrix(problem->size, problem->size, context);
  SUNLinearSolver solver = SUNLinSol_Dense(state, matrix, context);
#else
  state = N_VNew_Serial(problem->size);
  memory = CVodeCreate(CV_BDF);
  SUNMatrix matrix = SUNDenseMatrix(problem->size, problem->size);
  SUNLinearSolver solver = SUNLinSol_Dense(state, matrix);
#endif
  N_VConst(0, state);
  CVodeInit(memory, derivative, 0, state);
  CVodeSStolerances(memory, relative, absolute);
  CVodeSetLinearSolver(memory, solver, matrix);
  CVodeSetJacFn(memory, jacobian);
  CVodeSetMaxNumSteps(memory, 1000000);
}

static void peer_advance(double *y, double duration) {
  realtype reached;
  memcpy(NV_DATA_S(state), y, system_of->size * sizeof *y);
  CVodeReInit(memory, 0, state);
  CVodeSetStopTime(memory, duration);
  if (CVode(memory, duration, state, &reached, CV_NORMAL) < 0) exit(2);
  memcpy(y, NV_DATA_S(state), system_of->size * sizeof *y);
}
