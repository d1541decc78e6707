/* The LSODA kernel of ODEPACK, as compiled into R's package deSolve, restarted at each dose, with analytic Jacobian. */
#include "nonlinear.h"

extern void dlsoda_(void (*f)(int *, double *, double *, double *, double *, int *), int *n, double *y, double *t,
                    double *tout, int *itol, double *rtol, double *atol, int *itask, int *istate, int *iopt,
                    double *rwork, int *lrw, int *iwork, int *liw,
                    void (*jac)(int *, double *, double *, int *, int *, double *, int *, double *, int *), int *jt,
                    double *out, int *ipar);

static const Problem *system_of;
static double rtol, atol_all;

static void derivative(int *n, double *t, double *y, double *out, double *extra, int *ipar) {
  (void)n, (void)t, (void)extra, (void)ipar;
  system_of->derivative(y, out);
}

static void jacobian(int *n, double *t, double *y, int *ml, int *mu, double *out, int *rows, double *extra, int *ipar) {
  (void)t, (void)ml, (void)mu, (void)extra, (void)ipar;
  double entries[LARGEST * LARGEST];
  system_of->jacobian(y, entries);
  for (int i = 0; i < *n; i++)
    for (int j = 0; j < *n; j++) out[i + j * *rows] = entries[i * *n + j];
}

static void peer_begin(const Problem *problem, double relative, double absolute) {
  system_of = problem;
  rtol = relative;
  atol_all = absolute;
}

static void peer_advance(double *y, double duration) {
  int n = system_of->size, itol = 1, itask = 4, istate = 1, iopt = 1, lrw = 200, liw = 60, jt = 1, ipar[3] = {0};
  double t = 0, tout = duration, rwork[200] = {0}, out[1] = {0};
  int iwork[60] = {0};
  rwork[0] = duration;
  iwork[5] = 1000000;
  dlsoda_(derivative, &n, y, &t, &tout, &itol, &rtol, &atol_all, &itask, &istate, &iopt, rwork, &lrw, iwork, &liw,
          jacobian, &jt, out, ipar);
  if (istate < 0) exit(2);
}
