import type { Draft } from './draft'
import type { SettingText } from './setting-text'

/** Two routines of the Fennick estuary's gauge network (invented), the second of which needs a multiplier. */
export const DEMO_DRAFT: Draft = {
  file: 'fennick.tally',
  routine: undefined,
  text: `# Fennick estuary, a reading a word: level,
# minute of day, gauge from the top down.
# Sorted by digits of k bits, lowest first.
routine bylevel
  inout a[n]
  let   k = 8
  work  b[n], c[2^k]
  fix   r = 2^k - 1
  need  w mod (2*k) = 0   # ends in a, not in b
  claim time  = w/k * (20*n + 10*2^k + 17) + 4
  claim time  <= 150*n + 2^15
  claim space <= n + 2^k + 10
  check sorted(a)
  check same(a, old(a))
begin
  p <- addr(a)
  q <- addr(b)
  s <- 0
  while s < w
    for d from 0 to r
      c[d] <- 0
    end
    for i from 0 to n - 1
      d    <- (p[i] >> s) & r
      c[d] <- c[d] + 1
    end
    x <- 0
    for d from 0 to r
      y    <- c[d]
      c[d] <- x
      x    <- x + y
    end
    for i from 0 to n - 1
      d    <- (p[i] >> s) & r
      j    <- c[d]
      q[j] <- p[i]
      c[d] <- j + 1
    end
    t <- p
    p <- q
    q <- t
    s <- s + k
  end
end

# The same readings at the datum: times 4/5
# in fixed point, which wants a multiplier.
routine todatum
  inout a[n]
  fix   m = floor(2^w * 4 / 5)
  claim time  <= 6*n + 4
  claim space <= 4
  check all i in 0..n-1 : a[i] = floor(old(a)[i] * m / 2^w)
begin
  for i from 0 to n - 1
    hi, lo <- a[i] * m
    a[i]   <- hi
  end
end
`,
}

export const DEMO_SETTING: SettingText = {
  widths: '16, 32, 64',
  sets: ['full', 'no-multiply'],
  charges: 'unit',
  first: '2^6..2^16',
  others: {},
  lets: {},
  pattern: 'uniform',
  trials: '5',
  seed: '1',
}
