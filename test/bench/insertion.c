#include "twin.h"

size_t work_words(size_t n) {
  (void)n;
  return 0;
}

struct result kernel(word *a, size_t n, word *work) {
  (void)work;
  for (size_t i = 1; i < n; i++) {
    word x = a[i];
    size_t j = i;
    while (j > 0 && a[j - 1] > x) {
      a[j] = a[j - 1];
      j--;
    }
    a[j] = x;
  }
  return (struct result){a, n};
}
