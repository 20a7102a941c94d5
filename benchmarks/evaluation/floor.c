/*
 * The floor that the force field is measured against: MMFF94 energy and gradient by hand in C, from the tables that
 * benchmarks/evaluation.mjs writes. Same formulas as packages/forcefield/src/terms, gradient summed per table; the pair loop is laid out
 * for the compiler's vectoriser.
 *
 *   gcc -O3 -march=native -fopenmp-simd -fno-math-errno -fno-trapping-math -o floor floor.c -lm && ./floor TABLES SECONDS
 *
 * TABLES is a file of doubles: atoms, power of the dielectric, rows of bonds, angles, stretch-bends, out-of-planes, torsions, length of a
 * block of pair constants; coordinates; the tables row by row (offsets first); the blocks a, b, d, e, q. Prints the energy in kcal/mol, the
 * shortest time of one evaluation in microseconds, and the sum of the absolute gradient components.
 */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#define MDYN 143.9325
#define DEGREES 57.29577951308232
#define PER_DEGREE2 (MDYN / (DEGREES * DEGREES))

typedef struct { int i, j; double length, force; } Bond;
typedef struct { int i, j, k, linear; double angle, force; } Angle;
typedef struct { int i, j, k; double length_ij, length_kj, angle, force_ij, force_kj; } Coupling;
typedef struct { int i, j, k, l; double force; } Wilson;
typedef struct { int i, j, k, l; double v1, v2, v3; } Torsion;

static int atoms, bonds, angles, couplings, wilsons, torsions, block;
static double power;
static Bond *bond;
static Angle *angle;
static Coupling *coupling;
static Wilson *wilson;
static Torsion *torsion;
static double *a, *b, *d, *e, *q, *X, *Y, *Z, *GX, *GY, *GZ;

static inline void add(double *g, int at, double x, double y, double z) { g[at] += x; g[at + 1] += y; g[at + 2] += z; }

static double bond_stretching(const double *x, double *g) {
  double energy = 0;
  for (int n = 0; n < bonds; n++) {
    const Bond t = bond[n];
    const double dx = x[t.i] - x[t.j], dy = x[t.i + 1] - x[t.j + 1], dz = x[t.i + 2] - x[t.j + 2];
    const double r = sqrt(dx * dx + dy * dy + dz * dz), dr = r - t.length;
    energy += 0.5 * MDYN * t.force * dr * dr * (1 - 2 * dr + 28.0 / 12 * dr * dr);
    const double s = MDYN * t.force * dr * (1 - 3 * dr + 56.0 / 12 * dr * dr) / r;
    add(g, t.i, s * dx, s * dy, s * dz);
    add(g, t.j, -s * dx, -s * dy, -s * dz);
  }
  return energy;
}

static double angle_bending(const double *x, double *g) {
  double energy = 0;
  for (int n = 0; n < angles; n++) {
    const Angle t = angle[n];
    double ux = x[t.i] - x[t.j], uy = x[t.i + 1] - x[t.j + 1], uz = x[t.i + 2] - x[t.j + 2];
    double vx = x[t.k] - x[t.j], vy = x[t.k + 1] - x[t.j + 1], vz = x[t.k + 2] - x[t.j + 2];
    const double pu = 1 / sqrt(ux * ux + uy * uy + uz * uz), pv = 1 / sqrt(vx * vx + vy * vy + vz * vz);
    ux *= pu; uy *= pu; uz *= pu; vx *= pv; vy *= pv; vz *= pv;
    const double cosine = ux * vx + uy * vy + uz * vz;
    double per;
    if (t.linear) {
      energy += MDYN * t.force * (1 + cosine);
      per = -MDYN * t.force;
    } else {
      const double sine = sqrt(fmax(1 - cosine * cosine, 1e-24)), d = DEGREES * acos(cosine) - t.angle;
      energy += 0.5 * PER_DEGREE2 * t.force * d * d * (1 - 0.4 / DEGREES * d);
      per = PER_DEGREE2 * DEGREES * t.force * d * (1 - 0.6 / DEGREES * d) / sine;
    }
    const double pi = per * pu, pk = per * pv;
    const double ix = pi * (cosine * ux - vx), iy = pi * (cosine * uy - vy), iz = pi * (cosine * uz - vz);
    const double kx = pk * (cosine * vx - ux), ky = pk * (cosine * vy - uy), kz = pk * (cosine * vz - uz);
    add(g, t.i, ix, iy, iz);
    add(g, t.k, kx, ky, kz);
    add(g, t.j, -ix - kx, -iy - ky, -iz - kz);
  }
  return energy;
}

static double stretch_bend(const double *x, double *g) {
  double energy = 0;
  for (int n = 0; n < couplings; n++) {
    const Coupling t = coupling[n];
    double ux = x[t.i] - x[t.j], uy = x[t.i + 1] - x[t.j + 1], uz = x[t.i + 2] - x[t.j + 2];
    double vx = x[t.k] - x[t.j], vy = x[t.k + 1] - x[t.j + 1], vz = x[t.k + 2] - x[t.j + 2];
    const double ru = sqrt(ux * ux + uy * uy + uz * uz), rv = sqrt(vx * vx + vy * vy + vz * vz), pu = 1 / ru, pv = 1 / rv;
    ux *= pu; uy *= pu; uz *= pu; vx *= pv; vy *= pv; vz *= pv;
    const double cosine = ux * vx + uy * vy + uz * vz, sine = sqrt(fmax(1 - cosine * cosine, 1e-24));
    const double d = DEGREES * acos(cosine) - t.angle, stretch = t.force_ij * (ru - t.length_ij) + t.force_kj * (rv - t.length_kj);
    energy += 2.5121 * stretch * d;
    const double au = 2.5121 * t.force_ij * d, av = 2.5121 * t.force_kj * d, per = 2.5121 * DEGREES * stretch / sine;
    const double pi = per * pu, pk = per * pv;
    const double ix = au * ux + pi * (cosine * ux - vx), iy = au * uy + pi * (cosine * uy - vy), iz = au * uz + pi * (cosine * uz - vz);
    const double kx = av * vx + pk * (cosine * vx - ux), ky = av * vy + pk * (cosine * vy - uy), kz = av * vz + pk * (cosine * vz - uz);
    add(g, t.i, ix, iy, iz);
    add(g, t.k, kx, ky, kz);
    add(g, t.j, -ix - kx, -iy - ky, -iz - kz);
  }
  return energy;
}

static double out_of_plane(const double *x, double *g) {
  double energy = 0;
  for (int n = 0; n < wilsons; n++) {
    const Wilson t = wilson[n];
    double ux = x[t.i] - x[t.j], uy = x[t.i + 1] - x[t.j + 1], uz = x[t.i + 2] - x[t.j + 2];
    double vx = x[t.k] - x[t.j], vy = x[t.k + 1] - x[t.j + 1], vz = x[t.k + 2] - x[t.j + 2];
    double wx = x[t.l] - x[t.j], wy = x[t.l + 1] - x[t.j + 1], wz = x[t.l + 2] - x[t.j + 2];
    const double pu = 1 / sqrt(ux * ux + uy * uy + uz * uz), pv = 1 / sqrt(vx * vx + vy * vy + vz * vz), pw = 1 / sqrt(wx * wx + wy * wy + wz * wz);
    ux *= pu; uy *= pu; uz *= pu; vx *= pv; vy *= pv; vz *= pv; wx *= pw; wy *= pw; wz *= pw;
    double mx = uy * vz - uz * vy, my = uz * vx - ux * vz, mz = ux * vy - uy * vx;
    const double area = 1 / sqrt(fmax(mx * mx + my * my + mz * mz, 1e-12));
    mx *= area; my *= area; mz *= area;
    const double sine = fmin(fmax(mx * wx + my * wy + mz * wz, -1), 1), chi = DEGREES * asin(sine);
    energy += 0.5 * PER_DEGREE2 * t.force * chi * chi;
    const double per = PER_DEGREE2 * DEGREES * t.force * chi / sqrt(fmax(1 - sine * sine, 1e-12));
    const double px = wx - sine * mx, py = wy - sine * my, pz = wz - sine * mz;
    const double pi = per * area * pu, pk = per * area * pv, pl = per * pw;
    const double ix = pi * (vy * pz - vz * py), iy = pi * (vz * px - vx * pz), iz = pi * (vx * py - vy * px);
    const double kx = pk * (py * uz - pz * uy), ky = pk * (pz * ux - px * uz), kz = pk * (px * uy - py * ux);
    const double lx = pl * (mx - sine * wx), ly = pl * (my - sine * wy), lz = pl * (mz - sine * wz);
    add(g, t.i, ix, iy, iz);
    add(g, t.k, kx, ky, kz);
    add(g, t.l, lx, ly, lz);
    add(g, t.j, -ix - kx - lx, -iy - ky - ly, -iz - kz - lz);
  }
  return energy;
}

static double torsions_of(const double *x, double *g) {
  double energy = 0;
  for (int n = 0; n < torsions; n++) {
    const Torsion t = torsion[n];
    const double fx = x[t.i] - x[t.j], fy = x[t.i + 1] - x[t.j + 1], fz = x[t.i + 2] - x[t.j + 2];
    const double gx = x[t.j] - x[t.k], gy = x[t.j + 1] - x[t.k + 1], gz = x[t.j + 2] - x[t.k + 2];
    const double hx = x[t.l] - x[t.k], hy = x[t.l + 1] - x[t.k + 1], hz = x[t.l + 2] - x[t.k + 2];
    const double ax = fy * gz - fz * gy, ay = fz * gx - fx * gz, az = fx * gy - fy * gx;
    const double bx = hy * gz - hz * gy, by = hz * gx - hx * gz, bz = hx * gy - hy * gx;
    const double pa = 1 / fmax(ax * ax + ay * ay + az * az, 1e-12), pb = 1 / fmax(bx * bx + by * by + bz * bz, 1e-12);
    const double g2 = gx * gx + gy * gy + gz * gz, pab = sqrt(pa * pb), length = sqrt(g2), pg = 1 / g2;
    const double cosine = (ax * bx + ay * by + az * bz) * pab, sine = -(fx * bx + fy * by + fz * bz) * length * pab, c2 = cosine * cosine;
    energy += 0.5 * (t.v1 * (1 + cosine) + 2 * t.v2 * (1 - c2) + t.v3 * (1 + cosine * (4 * c2 - 3)));
    const double slope = -0.5 * sine * (t.v1 - 4 * t.v2 * cosine + t.v3 * (12 * c2 - 3));
    const double pi = -slope * length * pa, pl = slope * length * pb;
    const double ix = pi * ax, iy = pi * ay, iz = pi * az, lx = pl * bx, ly = pl * by, lz = pl * bz;
    const double fg = (fx * gx + fy * gy + fz * gz) * pg, hg = (hx * gx + hy * gy + hz * gz) * pg;
    const double sx = fg * ix + hg * lx, sy = fg * iy + hg * ly, sz = fg * iz + hg * lz;
    add(g, t.i, ix, iy, iz);
    add(g, t.j, -sx - ix, -sy - iy, -sz - iz);
    add(g, t.k, sx - lx, sy - ly, sz - lz);
    add(g, t.l, lx, ly, lz);
  }
  return energy;
}

/* One row: atom i with all atoms j > i. The pointers are shifted so that j indexes pairs and atoms alike. */
static double row_of(int i, const double *restrict a, const double *restrict b, const double *restrict d, const double *restrict e,
                     const double *restrict q, const double *restrict X, const double *restrict Y, const double *restrict Z,
                     double *restrict GX, double *restrict GY, double *restrict GZ) {
  const double xi = X[i], yi = Y[i], zi = Z[i], k0 = 2 - power, k1 = power - 1, n = power;
  double energy = 0, gx = 0, gy = 0, gz = 0;
  #pragma omp simd reduction(+ : energy, gx, gy, gz)
  for (int j = i + 1; j < atoms; j++) {
    const double dx = xi - X[j], dy = yi - Y[j], dz = zi - Z[j];
    const double r2 = dx * dx + dy * dy + dz * dz + 1e-24, r = sqrt(r2), r6 = r2 * r2 * r2, s = r + 0.05;
    const double t = 1 / (r + a[j]), w = 1 / (r6 * r + b[j]), v = 1 / (r * s), u = v * r;
    const double t2 = t * t, t7 = t2 * t2 * t2 * t, dw = d[j] * w, well = dw - e[j], coulomb = q[j] * u * (k0 + k1 * u);
    energy += t7 * well + coulomb;
    const double push = (7 * t7 * (well * t + dw * w * r6) + n * coulomb * u) * (v * s);
    const double fx = push * dx, fy = push * dy, fz = push * dz;
    gx += fx; gy += fy; gz += fz;
    GX[j] += fx; GY[j] += fy; GZ[j] += fz;
  }
  GX[i] -= gx; GY[i] -= gy; GZ[i] -= gz;
  return energy;
}

static double non_bonded(const double *x, double *g) {
  for (int i = 0; i < atoms; i++) { X[i] = x[3 * i]; Y[i] = x[3 * i + 1]; Z[i] = x[3 * i + 2]; GX[i] = GY[i] = GZ[i] = 0; }
  double energy = 0;
  long row = 0;
  for (int i = 0; i < atoms; i++) {
    const long shift = row - i - 1;
    energy += row_of(i, a + shift, b + shift, d + shift, e + shift, q + shift, X, Y, Z, GX, GY, GZ);
    row += atoms - i - 1;
  }
  for (int i = 0; i < atoms; i++) add(g, 3 * i, GX[i], GY[i], GZ[i]);
  return energy;
}

static double evaluate(const double *x, double *g) {
  memset(g, 0, 3 * atoms * sizeof(double));
  double energy = bond_stretching(x, g);
  energy += angle_bending(x, g);
  energy += stretch_bend(x, g);
  energy += out_of_plane(x, g);
  energy += torsions_of(x, g);
  return energy + non_bonded(x, g);
}

static double now(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return t.tv_sec * 1e6 + t.tv_nsec * 1e-3;
}

static double *column(int length) { return aligned_alloc(64, ((length * sizeof(double) + 63) / 64 + 1) * 64); }

int main(int count, char **argument) {
  FILE *file = count > 2 ? fopen(argument[1], "rb") : NULL;
  if (!file) { fprintf(stderr, "usage: floor TABLES SECONDS\n"); return 2; }
  fseek(file, 0, SEEK_END);
  const long length = ftell(file);
  rewind(file);
  double *data = malloc(length), *p = data;
  if (fread(data, 1, length, file) != (size_t)length) return 2;
  atoms = *p++; power = *p++; bonds = *p++; angles = *p++; couplings = *p++; wilsons = *p++; torsions = *p++; block = *p++;
  double *x = p, *g = column(3 * atoms);
  p += 3 * atoms;
  bond = malloc(sizeof(Bond) * (bonds + 1));
  for (int n = 0; n < bonds; n++, p += 4) bond[n] = (Bond){p[0], p[1], p[2], p[3]};
  angle = malloc(sizeof(Angle) * (angles + 1));
  for (int n = 0; n < angles; n++, p += 6) angle[n] = (Angle){p[0], p[1], p[2], p[3], p[4], p[5]};
  coupling = malloc(sizeof(Coupling) * (couplings + 1));
  for (int n = 0; n < couplings; n++, p += 8) coupling[n] = (Coupling){p[0], p[1], p[2], p[3], p[4], p[5], p[6], p[7]};
  wilson = malloc(sizeof(Wilson) * (wilsons + 1));
  for (int n = 0; n < wilsons; n++, p += 5) wilson[n] = (Wilson){p[0], p[1], p[2], p[3], p[4]};
  torsion = malloc(sizeof(Torsion) * (torsions + 1));
  for (int n = 0; n < torsions; n++, p += 7) torsion[n] = (Torsion){p[0], p[1], p[2], p[3], p[4], p[5], p[6]};
  double **blocks[] = {&a, &b, &d, &e, &q};
  for (int n = 0; n < 5; n++, p += block) memcpy(*blocks[n] = column(block + 8), p, block * sizeof(double));
  double **columns[] = {&X, &Y, &Z, &GX, &GY, &GZ};
  for (int n = 0; n < 6; n++) *columns[n] = column(atoms + 8);

  const double energy = evaluate(x, g);
  double sum = 0;
  for (int n = 0; n < 3 * atoms; n++) sum += fabs(g[n]);
  // batches of about 2 ms
  double begin = now();
  for (int n = 0; n < 20; n++) evaluate(x, g);
  const int batch = 1 + 2000 / ((now() - begin) / 20 + 0.01);
  double best = 1e30;
  const double until = now() + 1e6 * atof(argument[2]);
  while (now() < until) {
    begin = now();
    for (int n = 0; n < batch; n++) evaluate(x, g);
    best = fmin(best, (now() - begin) / batch);
  }
  printf("%.10f %.4f %.10f\n", energy, best, sum);
  return 0;
}
