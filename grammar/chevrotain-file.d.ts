declare module '*/chevrotain/lib/chevrotain.mjs' {
  export * from 'chevrotain'
}
