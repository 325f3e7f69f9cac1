/*
 * The layer kernel alone: Z and rho of every layer in every state, from occurrences in order of state.
 *
 *   cc -O3 -march=native -o kernel kernel.c
 *   ./kernel FOLDER STATES REPEATS LAYER..
 *
 * FOLDER holds state.u32 and programme_loss.f64 (raw, little-endian, one entry an occurrence); a LAYER is
 * attachment,limit,annual deductible and then the price of each reinstatement, as 10,5,0,1,0.5. Amounts in one currency.
 * Prints JSON: the median of the seconds a pass takes, the least, and the sums of the outputs to compare.
 */
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

/* Layers are worked on side by side, eight to a vector register at best; layers that are absent have a limit of 0. */
enum { WIDTH = 16, MOST_PRICES = 8 };

typedef struct {
  double attachment[WIDTH], limit[WIDTH], deductible[WIDTH], cover[WIDTH];
  /* Price over limit of each tranche, and where the tranche begins. */
  double price[MOST_PRICES][WIDTH], from[MOST_PRICES][WIDTH];
  int layers, tranches;
} Terms;

static void fail(const char *what) {
  fprintf(stderr, "kernel: %s\n", what);
  exit(1);
}

static void *read_all(const char *folder, const char *name, size_t size, size_t *count) {
  char path[4096];
  snprintf(path, sizeof path, "%s/%s", folder, name);
  FILE *file = fopen(path, "rb");
  if (file == NULL) fail(path);
  fseek(file, 0, SEEK_END);
  size_t bytes = (size_t)ftell(file);
  rewind(file);
  void *memory = aligned_alloc(64, (bytes / 64 + 1) * 64);
  if (memory == NULL || fread(memory, 1, bytes, file) != bytes) fail(path);
  fclose(file);
  *count = bytes / size;
  return memory;
}

static void read_layer(Terms *terms, int l, char *text) {
  double number[3 + MOST_PRICES];
  int n = 0;
  for (char *part = strtok(text, ","); part != NULL; part = strtok(NULL, ",")) {
    if (n == 3 + MOST_PRICES) fail("too many reinstatements");
    number[n++] = strtod(part, NULL);
  }
  if (n < 3) fail("a layer is attachment,limit,deductible,prices..");
  terms->attachment[l] = number[0];
  terms->limit[l] = number[1];
  terms->deductible[l] = number[2];
  terms->cover[l] = (n - 2) * number[1];
  for (int k = 0; k < n - 3; k++) {
    terms->price[k][l] = number[3 + k] / number[1];
    terms->from[k][l] = k * number[1];
  }
  if (n - 3 > terms->tranches) terms->tranches = n - 3;
}

static inline double between(double x, double least, double most) {
  x = x > least ? x : least;
  return x < most ? x : most;
}

/* z and rho: one row of `states` for each layer. */
static void kernel(const Terms *terms, size_t count, const uint32_t *state, const double *loss, size_t states, double *z, double *rho) {
  size_t layers = (size_t)terms->layers;
  memset(z, 0, layers * states * sizeof *z);
  memset(rho, 0, layers * states * sizeof *rho);
  double lowest = terms->attachment[0];
  for (size_t l = 1; l < layers; l++) lowest = terms->attachment[l] < lowest ? terms->attachment[l] : lowest;
  for (size_t i = 0; i < count;) {
    /* Losses that reach no layer are passed over. */
    if (loss[i] <= lowest) {
      i++;
      continue;
    }
    uint32_t s = state[i];
    double sum[WIDTH] = {0};
    for (; i < count && state[i] == s; i++) {
      double x = loss[i];
      for (int l = 0; l < WIDTH; l++) sum[l] += between(x - terms->attachment[l], 0, terms->limit[l]);
    }
    double paid[WIDTH], back[WIDTH] = {0};
    for (int l = 0; l < WIDTH; l++) paid[l] = between(sum[l] - terms->deductible[l], 0, terms->cover[l]);
    for (int k = 0; k < terms->tranches; k++)
      for (int l = 0; l < WIDTH; l++) back[l] += terms->price[k][l] * between(paid[l] - terms->from[k][l], 0, terms->limit[l]);
    for (size_t l = 0; l < layers; l++) {
      if (paid[l] <= 0) continue;
      z[l * states + s] = paid[l];
      rho[l * states + s] = back[l];
    }
  }
}

static double now(void) {
  struct timespec t;
  clock_gettime(CLOCK_MONOTONIC, &t);
  return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

static int by_size(const void *a, const void *b) {
  double x = *(const double *)a, y = *(const double *)b;
  return (x > y) - (x < y);
}

static void print_sums(const char *name, const double *figures, size_t layers, size_t states) {
  printf(", \"%s\": [", name);
  for (size_t l = 0; l < layers; l++) {
    double sum = 0;
    for (size_t s = 0; s < states; s++) sum += figures[l * states + s];
    printf("%s%.17g", l > 0 ? ", " : "", sum);
  }
  printf("]");
}

int main(int argc, char **argv) {
  if (argc < 5 || argc - 4 > WIDTH) fail("usage: kernel FOLDER STATES REPEATS LAYER.. (16 layers at most)");
  size_t states = strtoul(argv[2], NULL, 10), n, m;
  int repeats = atoi(argv[3]);
  uint32_t *state = read_all(argv[1], "state.u32", sizeof *state, &n);
  double *loss = read_all(argv[1], "programme_loss.f64", sizeof *loss, &m);
  if (n != m) fail("columns of different lengths");
  for (size_t i = 0; i < n; i++)
    if (state[i] >= states || (i > 0 && state[i] < state[i - 1])) fail("states out of order");
  static Terms terms;
  terms.layers = argc - 4;
  for (int l = 0; l < terms.layers; l++) read_layer(&terms, l, argv[4 + l]);
  size_t bytes = ((size_t)terms.layers * states * sizeof(double) / 64 + 1) * 64;
  double *z = aligned_alloc(64, bytes), *rho = aligned_alloc(64, bytes);
  double *seconds = malloc((size_t)(repeats > 0 ? repeats : 1) * sizeof *seconds);
  if (z == NULL || rho == NULL || seconds == NULL || repeats < 1) fail("no memory, or no repeats");
  /* Once before the clock runs, so that the memory is there. */
  kernel(&terms, n, state, loss, states, z, rho);
  for (int r = 0; r < repeats; r++) {
    double start = now();
    kernel(&terms, n, state, loss, states, z, rho);
    seconds[r] = now() - start;
  }
  qsort(seconds, (size_t)repeats, sizeof *seconds, by_size);
  double median = 0.5 * (seconds[(repeats - 1) / 2] + seconds[repeats / 2]);
  printf("{\"occurrences\": %zu, \"states\": %zu, \"layers\": %d, \"repeats\": %d, \"medianSeconds\": %.9g, \"leastSeconds\": %.9g", n, states,
         terms.layers, repeats, median, seconds[0]);
  print_sums("payoffSums", z, (size_t)terms.layers, states);
  print_sums("reinstatementSums", rho, (size_t)terms.layers, states);
  printf("}\n");
  return 0;
}
