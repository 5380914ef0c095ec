#include "twin.h"

size_t work_words(size_t n) {
  (void)n;
  return 2;
}

struct result kernel(word *a, size_t n, word *work) {
  word low = 1, high = 0;
  for (size_t i = 0; i < n; i++) {
    two_words product = (two_words)(low | 1) * a[i];
    low ^= (word)product;
    high += (word)(product >> W);
  }
  work[0] = low;
  work[1] = high;
  return (struct result){work, 2};
}
