/**
 * Routines that stand in for an instruction that a machine lacks, in tally notation, with nothing but add, compare,
 * move, jump (and shift where the name says so). Each text holds one procedure. `top` is the highest bit alone: a word at
 * or above it has that bit set, so that bits can be read from the top by compares and the word moved up by x + x.
 */
export const EXPANSION_TEXTS = {
  multiply: `# Low word of x * y: bits of y from the top, doubling the sum.
routine multiply
  fix top = 2^(w - 1)
  procedure product(x, y) -> z
    z <- 0
    for i from 1 to w
      z <- z + z
      if y >= top
        z <- z + x
      end
      y <- y + y
    end
  end
begin
  halt
end
`,
  'multiply with shift': `# Low word of x * y: bits of y from the bottom, until none is left.
routine multiply
  procedure product(x, y) -> z
    z <- 0
    while y != 0
      h <- y >> 1
      d <- h + h
      if d != y
        z <- z + x
      end
      x <- x + x
      y <- h
    end
  end
begin
  halt
end
`,
  product: `# Two-word product of x and y: bits of y from the top, doubling the two words; a sum that came out smaller than its part carried.
routine product
  fix top = 2^(w - 1)
  procedure twowords(x, y) -> high, low
    high <- 0
    low <- 0
    for i from 1 to w
      high <- high + high
      if low >= top
        high <- high + 1
      end
      low <- low + low
      if y >= top
        low <- low + x
        if low < x
          high <- high + 1
        end
      end
      y <- y + y
    end
  end
begin
  halt
end
`,
  divide: `# Quotient of x by y: long division, a bit at a time. A rest that doubling pushes past the word is above any y.
routine divide
  fix top = 2^(w - 1)
  procedure quotient(x, y) -> q
    q <- 0
    r <- 0
    for i from 1 to w
      q <- q + q
      carry <- 0
      if r >= top
        carry <- 1
      end
      r <- r + r
      if x >= top
        r <- r + 1
      end
      x <- x + x
      if carry = 1 or r >= y
        r <- r - y
        q <- q + 1
      end
    end
  end
begin
  halt
end
`,
  modulo: `# Rest of x by y: as for the quotient, which is not kept.
routine modulo
  fix top = 2^(w - 1)
  procedure rest(x, y) -> r
    r <- 0
    for i from 1 to w
      carry <- 0
      if r >= top
        carry <- 1
      end
      r <- r + r
      if x >= top
        r <- r + 1
      end
      x <- x + x
      if carry = 1 or r >= y
        r <- r - y
      end
    end
  end
begin
  halt
end
`,
  popcount: `# Set bits of x, read from the top until none is left.
routine popcount
  fix top = 2^(w - 1)
  procedure bits(x) -> count
    count <- 0
    while x != 0
      if x >= top
        count <- count + 1
      end
      x <- x + x
    end
  end
begin
  halt
end
`,
  'popcount with logic': `# Set bits of x: x & (x - 1) takes the lowest away.
routine popcount
  procedure bits(x) -> count
    count <- 0
    while x != 0
      x <- x & (x - 1)
      count <- count + 1
    end
  end
begin
  halt
end
`,
  msb: `# Place of the highest set bit: doublings until it is at the top.
routine msb
  fix top = 2^(w - 1)
  procedure highest(x) -> i
    i <- w
    if x != 0
      i <- i - 1
      while x < top
        x <- x + x
        i <- i - 1
      end
    end
  end
begin
  halt
end
`,
  lsb: `# Place of the lowest set bit: doublings until it alone is left, at the top.
routine lsb
  fix top = 2^(w - 1)
  procedure lowest(x) -> i
    i <- w
    if x != 0
      i <- i - 1
      while x != top
        x <- x + x
        i <- i - 1
      end
    end
  end
begin
  halt
end
`,
  'shift-left': `# x * 2^s: s doublings; s of w or more leaves nothing.
routine shiftleft
  procedure up(x, s) -> z
    if s >= w
      z <- 0
    else
      z <- x
      while s != 0
        z <- z + z
        s <- s - 1
      end
    end
  end
begin
  halt
end
`,
  'shift-right': `# floor(x / 2^s): the w - s highest bits of x, read from the top.
routine shiftright
  fix top = 2^(w - 1)
  procedure down(x, s) -> z
    z <- 0
    while s < w
      z <- z + z
      if x >= top
        z <- z + 1
      end
      x <- x + x
      s <- s + 1
    end
  end
begin
  halt
end
`,
  and: `# Bits set in both, read from the top.
routine conjunction
  fix top = 2^(w - 1)
  procedure both(x, y) -> z
    z <- 0
    for i from 1 to w
      z <- z + z
      if x >= top and y >= top
        z <- z + 1
      end
      x <- x + x
      y <- y + y
    end
  end
begin
  halt
end
`,
  or: `# Bits set in either, read from the top.
routine disjunction
  fix top = 2^(w - 1)
  procedure either(x, y) -> z
    z <- 0
    for i from 1 to w
      z <- z + z
      if x >= top or y >= top
        z <- z + 1
      end
      x <- x + x
      y <- y + y
    end
  end
begin
  halt
end
`,
  xor: `# Bits set in one alone, read from the top.
routine parting
  fix top = 2^(w - 1)
  procedure one(x, y) -> z
    z <- 0
    for i from 1 to w
      z <- z + z
      if x >= top
        if y < top
          z <- z + 1
        end
      else if y >= top
        z <- z + 1
      end
      x <- x + x
      y <- y + y
    end
  end
begin
  halt
end
`,
  complement: `# Every bit turned: -x - 1.
routine complement
  procedure turned(x) -> z
    z <- 0 - x
    z <- z - 1
  end
begin
  halt
end
`,
} as const
