/** One recorded quantity of a history. */
export interface ChannelInfo {
  /** Short name, unique in the history: `CN`, `rotor1.CT`, `wake.speedMax`. */
  readonly name: string;
  /** Unit as printed, `1` where the quantity has none. */
  readonly unit: string;
  /** What it is, with its reference quantities, in one line. */
  readonly what: string;
  /** Loads are averaged and handed out; monitors only tell whether the solver is sound. */
  readonly role: "load" | "monitor";
}

/** A period that the solver knows its output to carry (blade passing, wake truncation, loop), in time steps. */
export interface DeclaredPeriod {
  readonly name: string;
  /** Length in steps; need not be whole. */
  readonly steps: number;
}
