#include "twin.h"

size_t work_words(size_t n) { return n + 256; }

struct result kernel(word *a, size_t n, word *work) {
  word *source = a, *target = work, *count = work + n;
  for (int s = 0; s < W; s += 8) {
    for (int d = 0; d < 256; d++) count[d] = 0;
    for (size_t i = 0; i < n; i++) count[(source[i] >> s) & 255]++;
    word sum = 0;
    for (int d = 0; d < 256; d++) {
      word here = count[d];
      count[d] = sum;
      sum += here;
    }
    for (size_t i = 0; i < n; i++) {
      word x = source[i];
      target[count[(x >> s) & 255]++] = x;
    }
    word *other = source;
    source = target;
    target = other;
  }
  return (struct result){source, n};
}
