/**
 * Chevrotain, from the single file that its package ships: the package's entry loads some 600 small files, which takes
 * a command and every test file about thirty times as long to start.
 */
export * from '../node_modules/chevrotain/lib/chevrotain.mjs'
