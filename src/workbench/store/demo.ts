import type { Draft } from './draft'
import type { SettingText } from './setting-text'

/** Two routines of the Fennick estuary's gauge network (invented); the first leans on a multiplier. */
export const DEMO_DRAFT: Draft = {
  file: 'fennick.tally',
  routine: undefined,
  text: `# Fennick estuary, a reading a word: level,
# minute of day, gauge from the top down.
# Sorted by class of level, then by insertion.
routine bylevel
  inout a[n]
  let   d = 1             # classes a reading
  work  b[n], c[d*n]
  fix   m = d*n
  need  m < 2^w
  claim time  <= 20*n*w + 2^12
  claim space <= (d + 1)*n + 12
  check sorted(a)
  check same(a, old(a))
begin
  for j from 0 to m - 1
    c[j] <- 0
  end
  for i from 0 to n - 1
    j, x <- a[i] * m
    c[j] <- c[j] + 1
  end
  p <- 0
  for j from 0 to m - 1
    x    <- c[j]
    c[j] <- p
    p    <- p + x
  end
  for i from 0 to n - 1
    j, x <- a[i] * m
    p    <- c[j]
    b[p] <- a[i]
    c[j] <- p + 1
  end
  for i from 0 to n - 1
    x <- b[i]
    j <- i
    while j > 0 and a[j - 1] > x
      a[j] <- a[j - 1]
      j    <- j - 1
    end
    a[j] <- x
  end
end

# The sum of a day's readings, in two words.
routine daysum
  in    a[n]
  out   high, low
  claim time  <= 8*n + 5
  claim space <= 2
  check high * 2^w + low = sum(a)
begin
  low  <- 0
  high <- 0
  for i from 0 to n - 1
    x   <- a[i]
    low <- low + x
    if low < x
      high <- high + 1
    end
  end
end
`,
}

export const DEMO_SETTING: SettingText = {
  widths: '16, 32, 64',
  sets: ['full', 'no-multiply'],
  off: 'expand',
  charges: 'unit',
  first: '2^6..2^16',
  others: {},
  lets: {},
  pattern: 'uniform',
  trials: '2',
  seed: '1',
}
