#include "twin.h"

size_t work_words(size_t n) {
  (void)n;
  return 1;
}

/* gcc -O2 unrolls the recursion a few levels deep; that is part of what the twin is compared with. */
static word fib(word k) {
  if (k < 2) return k;
  word x = fib(k - 1);
  word y = fib(k - 2);
  return x + y;
}

struct result kernel(word *a, size_t n, word *work) {
  (void)n;
  work[0] = fib(a[0]);
  return (struct result){work, 1};
}
