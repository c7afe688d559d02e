/** One leg waiting for its turn. The store is the truth: a ticket whose `legs` is out of date is dropped when it comes up. */
export interface LegTicket {
  readonly campaign: string;
  readonly runId: string;
  readonly attempt: number;
  /** Legs of the attempt committed when the ticket was made. */
  readonly legs: number;
  /** Times that the same leg was begun and came to nothing in this night; tickets that differ are different tickets. */
  readonly tries: number;
}

/** Legs in the order of the night. Delivery is at least once; the store makes the results exactly once. */
export interface LegQueue {
  /** Adds tickets; a smaller `priority` (1 to 2 000 000) comes first. */
  add(tickets: readonly { readonly ticket: LegTicket; readonly priority: number }[]): Promise<void>;
  /** Forgets every ticket, so that the queue can be rebuilt from the store. */
  clear(): Promise<void>;
  /** Hands tickets to `handle`, `size` at a time, until closed. A rejected ticket is forgotten and told to `onError`. */
  consume(options: {
    readonly size: number;
    readonly handle: (ticket: LegTicket) => Promise<void>;
    readonly onError: (error: Error) => void;
  }): LegConsumer;
  close(): Promise<void>;
}

/** The side that takes tickets. */
export interface LegConsumer {
  /** Takes no more tickets; resolves when those in hand are dealt with. */
  close(): Promise<void>;
}
