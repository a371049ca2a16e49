/** The part of jstat 1.9 that this room uses; the package brings no types of its own. */
declare module "jstat" {
  const jstat: {
    readonly normal: {
      /** Normal quantile of p. */
      inv(p: number, mean: number, sd: number): number;
    };
  };
  export = jstat;
}
