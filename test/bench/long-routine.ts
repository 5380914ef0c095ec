/** A routine of about `count` lines that mixes every form: for timing what leads from text to module. */
export function longRoutine(count: number): string {
  const stretch = (at: number) => [
    `  x${at} <- a[i] + ${at}`,
    `  y <- (x${at} << 3) xor (x${at} >> 5)`,
    `  if y < x${at} goto skip${at}`,
    `  b[i] <- y & ${at % 97}`,
    `skip${at}:`,
    `  for j from 0 to 3`,
    `    z <- z + b[j] * x${at}`,
    `    if z > y and j != 2`,
    `      y <- y | z`,
    `    else`,
    `      y <- -y`,
    `    end`,
    `  end`,
    `  while z > ${at + 7}`,
    `    z <- z >> 1`,
    `  end`,
    `  high, low <- y * z`,
    `  i <- (i + high + low) & 3`,
  ]
  const head = ['routine long', '  in    a[n]', '  inout b[n]', '  out   z', 'begin', '  i <- 0', '  z <- 1']
  const body = Array.from({ length: Math.ceil((count - head.length - 1) / 18) }, (_, at) => stretch(at)).flat()
  return [...head, ...body, 'end', ''].join('\n')
}
