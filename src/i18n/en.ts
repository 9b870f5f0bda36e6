/** All words on screen, by capability. Typed objects and functions; a missing word does not compile. */
export * from './en/common.ts'
export * from './en/format.ts'
export * from './en/gauge.ts'
export * from './en/people.ts'
export * from './en/problems.ts'
export * from './en/shell.ts'
