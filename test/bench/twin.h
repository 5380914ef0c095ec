/* A C twin of a benched routine: the same work, counting nothing. Compiled with -DW=32 or -DW=64.
   usage: twin INPUT ROUNDS   INPUT holds words of W bits in the host's byte order.
   Prints a line for each timed round: nanoseconds, then a checksum over the words of the result. One round more runs
   first, untimed. */
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

#if W == 32
typedef uint32_t word;
typedef uint64_t two_words;
#elif W == 64
typedef uint64_t word;
typedef unsigned __int128 two_words;
#else
#error "W is 32 or 64"
#endif

struct result {
  const word *words;
  size_t length;
};

/* Words of working memory that the kernel takes for an input of n words. */
size_t work_words(size_t n);
/* a holds a fresh copy of the input. */
struct result kernel(word *a, size_t n, word *work);

int main(int count, char **argument) {
  if (count != 3) return 2;
  FILE *file = fopen(argument[1], "rb");
  if (!file) return 3;
  fseek(file, 0, SEEK_END);
  size_t n = (size_t)ftell(file) / sizeof(word);
  rewind(file);
  word *input = malloc(n * sizeof(word) + 1);
  word *a = malloc(n * sizeof(word) + 1);
  word *work = malloc(work_words(n) * sizeof(word) + 1);
  if (!input || !a || !work || fread(input, sizeof(word), n, file) != n) return 4;
  fclose(file);
  memset(work, 0x5a, work_words(n) * sizeof(word));
  for (int round = -1; round < atoi(argument[2]); round++) {
    memcpy(a, input, n * sizeof(word));
    struct timespec start, end;
    clock_gettime(CLOCK_MONOTONIC, &start);
    struct result result = kernel(a, n, work);
    clock_gettime(CLOCK_MONOTONIC, &end);
    uint64_t checksum = 0;
    for (size_t i = 0; i < result.length; i++) checksum = checksum * 31 + result.words[i];
    if (round < 0) continue;
    long long elapsed = (end.tv_sec - start.tv_sec) * 1000000000LL + (end.tv_nsec - start.tv_nsec);
    printf("%lld %llu\n", elapsed, (unsigned long long)checksum);
  }
  return 0;
}
