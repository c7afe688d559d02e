/*
 * Reference for the pair kernel's speed: the same lattice loop as workers/model/kernel/typescript-kernel.ts in double
 * precision C, for the compiler to vectorise over points. Reads a problem from standard input, repeats it when told to,
 * and prints the CPU seconds that each repeat took.
 *
 *   input, native doubles and 32-bit integers:
 *     int32 lattices, points; points x, y, z; for each lattice int32 rows, cols, then records of 16 doubles a node
 *   each byte 'r' on standard input afterwards runs once and prints "<seconds>"; 'w' writes u, v, w as raw doubles.
 *
 * gcc -O3 -march=native -fno-math-errno -fno-trapping-math lattice-reference.c -lm
 */
#include <math.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#define LANES 8
#define RECORD 16

typedef struct {
  int32_t rows, cols;
  double *records;
} Lattice;

static void need(void *to, size_t size, size_t count) {
  if (fread(to, size, count, stdin) != count) {
    fprintf(stderr, "input ends early\n");
    exit(2);
  }
}

static double *doubles(size_t count) {
  double *p = aligned_alloc(64, ((count + LANES) * sizeof(double) + 63) / 64 * 64);
  if (!p) exit(2);
  for (size_t i = 0; i < count + LANES; i++) p[i] = 0;
  return p;
}

/* Factor of e x r for one edge (records 3 to 5 of the edge), far and near end at those distances. */
static inline double factor(const double *edge, double far, double near) {
  const double s = far + near, den = s * s - edge[3], floor = edge[4];
  return edge[5] * s / (far * near * (den < floor ? floor : den));
}

typedef struct {
  double u[LANES], v[LANES], w[LANES];
} Sum;

/* One node against LANES points: its streamwise edge, and its spanwise edge if there is one. */
static inline __attribute__((always_inline)) void node(const double *restrict rec, int spanwise,
                                                       const double *restrict px, const double *restrict py,
                                                       const double *restrict pz, Sum *restrict sum,
                                                       double *restrict left, double *restrict top) {
  for (int i = 0; i < LANES; i++) {
    const double rx = px[i] - rec[0], ry = py[i] - rec[1], rz = pz[i] - rec[2];
    const double near = sqrt(rx * rx + ry * ry + rz * rz + rec[3]);
    if (spanwise) {
      const double k = factor(rec + 4, left[i], near);
      sum->u[i] += k * (rec[5] * rz - rec[6] * ry);
      sum->v[i] += k * (rec[6] * rx - rec[4] * rz);
      sum->w[i] += k * (rec[4] * ry - rec[5] * rx);
    }
    const double k = factor(rec + 10, top[i], near);
    sum->u[i] += k * (rec[11] * rz - rec[12] * ry);
    sum->v[i] += k * (rec[12] * rx - rec[10] * rz);
    sum->w[i] += k * (rec[10] * ry - rec[11] * rx);
    left[i] = near;
    top[i] = near;
  }
}

/* One block of LANES points against one lattice; far holds LANES doubles a column. */
static void block(const Lattice *l, const double *restrict px, const double *restrict py, const double *restrict pz,
                  double *restrict ou, double *restrict ov, double *restrict ow, double *restrict far) {
  Sum total = {{0}, {0}, {0}};
  for (int i = 0; i < l->cols * LANES; i++) far[i] = 1;
  const double *restrict rec = l->records;
  for (int r = 0; r < l->rows; r++) {
    Sum sum = {{0}, {0}, {0}};
    double left[LANES];
    node(rec, 0, px, py, pz, &sum, left, far);
    rec += RECORD;
    for (int c = 1; c < l->cols; c++, rec += RECORD) node(rec, 1, px, py, pz, &sum, left, far + c * LANES);
    for (int i = 0; i < LANES; i++) {
      total.u[i] += sum.u[i];
      total.v[i] += sum.v[i];
      total.w[i] += sum.w[i];
    }
  }
  for (int i = 0; i < LANES; i++) {
    ou[i] += total.u[i];
    ov[i] += total.v[i];
    ow[i] += total.w[i];
  }
}

int main(void) {
  int32_t lattices, n;
  need(&lattices, 4, 1);
  need(&n, 4, 1);
  double *x[3], *out[3];
  for (int k = 0; k < 3; k++) {
    x[k] = doubles(n);
    out[k] = doubles(n);
    need(x[k], 8, n);
  }
  Lattice *all = calloc(lattices, sizeof(Lattice));
  int32_t widest = 1;
  for (int k = 0; k < lattices; k++) {
    need(&all[k].rows, 4, 1);
    need(&all[k].cols, 4, 1);
    all[k].records = doubles((size_t)all[k].rows * all[k].cols * RECORD);
    need(all[k].records, 8, (size_t)all[k].rows * all[k].cols * RECORD);
    if (all[k].cols > widest) widest = all[k].cols;
  }
  double *far = doubles((size_t)widest * LANES);
  for (int command; (command = getchar()) != EOF;) {
    if (command == 'r') {
      for (int k = 0; k < 3; k++)
        for (int i = 0; i < n; i++) out[k][i] = 0;
      const clock_t from = clock();
      for (int k = 0; k < lattices; k++)
        for (int i = 0; i < n; i += LANES)
          block(&all[k], x[0] + i, x[1] + i, x[2] + i, out[0] + i, out[1] + i, out[2] + i, far);
      printf("%.9f\n", (double)(clock() - from) / CLOCKS_PER_SEC);
    } else if (command == 'w') {
      for (int k = 0; k < 3; k++) fwrite(out[k], 8, n, stdout);
    }
    fflush(stdout);
  }
  return 0;
}
