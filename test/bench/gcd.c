#include "twin.h"

size_t work_words(size_t n) {
  (void)n;
  return 1;
}

struct result kernel(word *a, size_t n, word *work) {
  word sum = 0;
  for (size_t i = 0; i + 1 < n; i += 2) {
    word u = a[i] | 1, v = a[i + 1];
    while (v != 0) {
      while ((v & 1) == 0) v >>= 1;
      if (u > v) {
        word t = u;
        u = v;
        v = t;
      }
      v -= u;
    }
    sum += u;
  }
  work[0] = sum;
  return (struct result){work, 1};
}
