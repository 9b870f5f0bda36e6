/** The few functions of jStat 1.9.6 that are used here; the package ships no types of its own. */
declare module 'jstat' {
  interface GammaFamily {
    inv(p: number, shape: number, scale: number): number
  }
  interface ChiSquareFamily {
    inv(p: number, degreesOfFreedom: number): number
  }
  const jStat: { gamma: GammaFamily; chisquare: ChiSquareFamily }
  export default jStat
}
