/** Why a row without a value in its unit column was rejected, as rejects.csv and the JSON files have it. */
export const NO_UNIT = "no unit";

/** Why rows were rejected, for readers of a page: there a unit is what the plan calls it. */
export function rejectReason(reason: string, unit: { readonly one: string }): string {
  return reason === NO_UNIT ? `no ${unit.one}` : reason;
}
