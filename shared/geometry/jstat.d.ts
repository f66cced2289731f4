/** The parts of jstat that are used here; the package ships no types. */
declare module 'jstat' {
  interface JStat {
    readonly centralF: { inv(probability: number, df1: number, df2: number): number }
    readonly studentt: { inv(probability: number, df: number): number }
    readonly normal: { inv(probability: number, mean: number, sd: number): number }
  }
  const jStat: JStat
  export default jStat
}
