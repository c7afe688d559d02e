/** The caution that goes with every load that leaves midwatch: board, report, tables and files alike. */
export const CAUTION =
  "Estimates of a low-order model (or of your own solver), not certified design loads: follow the codes that apply and let a licensed engineer decide.";
