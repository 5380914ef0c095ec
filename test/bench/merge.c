#include "twin.h"

size_t work_words(size_t n) { return n; }

static void sort(word *a, word *b, size_t low, size_t high) {
  if (high - low < 2) return;
  size_t middle = low + ((high - low) >> 1);
  sort(a, b, low, middle);
  sort(a, b, middle, high);
  for (size_t k = low; k < high; k++) b[k] = a[k];
  size_t i = low, j = middle;
  for (size_t k = low; k < high; k++) {
    if (j == high || (i != middle && b[i] <= b[j])) a[k] = b[i++];
    else a[k] = b[j++];
  }
}

struct result kernel(word *a, size_t n, word *work) {
  sort(a, work, 0, n);
  return (struct result){a, n};
}
