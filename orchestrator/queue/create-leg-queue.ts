// The queue of legs. BullMQ is known in this folder alone; leg-queue.ts says what the rest may rely on. The queue holds
// nothing that the store does not know: it can be cleared and rebuilt at any time. Read leg-queue.ts first.
import { createPostgresBackend, type PgPool, runMigrations, withBackend } from "bullmq";
import { z } from "zod";
import type { SqlPool } from "../store/sql-pool.ts";
import type { LegConsumer, LegQueue, LegTicket } from "./leg-queue.ts";

const NAME = "legs";
/** A worker that does not renew its lock for this long is taken to be gone. */
const LOCK_MS = 10_000;
const STALLED_LOOK_MS = 5_000;
/** Attempts are counted in the store, never here. */
const STALLED_MAX = 1_000_000;
/** Tickets written by one call. */
const BATCH = 1000;

const ticketSchema = z.object({
  campaign: z.string(),
  runId: z.string(),
  attempt: z.int(),
  legs: z.int(),
  tries: z.int(),
});

/** The queue on PostgreSQL sessions, in-process or not. */
export async function createLegQueue(pool: SqlPool): Promise<LegQueue> {
  const client = await pool.connect();
  try {
    await runMigrations(client);
  } finally {
    client.release();
  }
  // The in-process database has one session, so that this holds for every client; our own SQL names its schema.
  await pool.query("set search_path to bullmq, public");
  const connection: PgPool = pool;
  const { Queue, Worker } = withBackend(createPostgresBackend);
  const queue = new Queue<LegTicket>(NAME, { connection });
  let onQueueError: (error: Error) => void = () => undefined;
  queue.on("error", (error) => onQueueError(error));
  await queue.waitUntilReady();
  let clearing: Promise<unknown> = Promise.resolve();
  return {
    add: async (tickets) => {
      for (let i = 0; i < tickets.length; i += BATCH)
        await queue.addBulk(tickets.slice(i, i + BATCH).map(({ ticket, priority }) => job(ticket, priority)));
    },
    // Clearing pauses the queue while it lasts: one at a time, or the first would wake it under the second.
    clear: () => {
      const next = clearing.then(async () => {
        await queue.obliterate({ force: true });
        await queue.resume();
      });
      clearing = next.catch(() => undefined);
      return next;
    },
    consume: ({ size, handle, onError }): LegConsumer => {
      onQueueError = onError;
      const worker = new Worker<LegTicket>(
        NAME,
        async (taken) => {
          await handle(ticketSchema.parse(taken.data));
        },
        {
          connection,
          concurrency: size,
          lockDuration: LOCK_MS,
          stalledInterval: STALLED_LOOK_MS,
          maxStalledCount: STALLED_MAX,
        },
      );
      worker.on("error", onError);
      worker.on("failed", (_job, error) => onError(error));
      return { close: () => worker.close() };
    },
    close: () => queue.close(),
  };
}

function job(ticket: LegTicket, priority: number) {
  const { campaign, runId, attempt, legs, tries } = ticket;
  return {
    name: "leg",
    data: ticket,
    opts: {
      // The same leg twice is one job; BullMQ keeps colons for itself.
      jobId: [campaign, runId, attempt, legs, tries].join(".").replaceAll(":", "_"),
      priority,
      removeOnComplete: true,
      removeOnFail: true,
    },
  };
}
