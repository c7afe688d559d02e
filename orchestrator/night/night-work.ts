import { rmSync } from "node:fs";
import { join } from "node:path";
import type { LegEnding, LegProgress } from "../contract/index.ts";
import type { LegConsumer, LegQueue, LegTicket } from "../queue/leg-queue.ts";
import { diskFull, freeBytes, isDiskFull } from "../store/disk-full.ts";
import type { CampaignRun } from "../store/rows.ts";
import type { LegClaim, LegCommit } from "../store/store.ts";
import type { NightEnd, NightOptions, NightSummary, RunName } from "./api.ts";
import { commitOfDeath, commitOfReport } from "./commit-of.ts";
import { legOrderOf } from "./leg-order-of.ts";
import { NightLedger } from "./night-ledger.ts";

/** Seconds of compute from checkpoint to checkpoint. */
const LEG_SECONDS = 5;
/** Room on the disk below which no leg is begun: enough for the database's log and the legs in flight. */
const RESERVE_BYTES = 48 * 2 ** 20;
/** Deaths in a row, by a hand from outside, after which a run is given up. */
const DEATHS_MAX = 3;
/** How often the night looks whether the queue has forgotten something. */
const RECONCILE_MS = 3000;
/** Complaints of the queue that a night bears. */
const QUEUE_TROUBLES_MAX = 200;
/** Tries of tickets that a rebuild makes count from here. */
const REBUILT = 1000;
/** Shortest time between two tallies. */
const TALLY_MS = 1000;
/** Longest time that a timer is set for, so that a clock that jumps is noticed. */
const DEADLINE_LOOK_MS = 20_000;

type Trouble = NightSummary["trouble"];
type QueuedLeg = { readonly ticket: LegTicket; readonly priority: number };

/** One night's work: takes legs from the queue, has them computed, commits them, decides what is next, and ends. */
export class NightWork {
  readonly #options: NightOptions;
  readonly #queue: LegQueue;
  readonly #ledger: NightLedger;
  readonly #deadlineMs: number | null;
  readonly #startedMs: number;
  readonly #abort = new AbortController();
  readonly #inFlight = new Set<string>();
  readonly #slots: (string | null)[];
  readonly #aside = new Set<string>();
  readonly done: Promise<NightSummary>;
  #settle: { resolve: (summary: NightSummary) => void; reject: (error: unknown) => void } | null = null;
  #consumer: LegConsumer | null = null;
  #end: NightEnd | null = null;
  #trouble: Trouble = null;
  #bug: unknown = null;
  #timer: NodeJS.Timeout | null = null;
  #reconciler: NodeJS.Timeout | null = null;
  #wasIdle = false;
  #queueTroubles = 0;
  #rebuilds = 0;
  #toldMs = 0;

  constructor(
    options: NightOptions,
    given: { queue: LegQueue; runs: readonly CampaignRun[]; deadlineMs: number | null },
  ) {
    this.#options = options;
    this.#queue = given.queue;
    this.#ledger = new NightLedger(options.plan, given.runs);
    this.#deadlineMs = given.deadlineMs;
    this.#startedMs = options.now();
    this.#slots = Array.from({ length: options.runner.size }, () => null);
    this.done = new Promise((resolve, reject) => {
      this.#settle = { resolve, reject };
    });
  }

  /** Rebuilds the queue from the store and begins. */
  async begin(): Promise<void> {
    const { plan, runner, onEvent } = this.#options;
    await this.#queue.clear();
    await this.#queue.add(this.#ledger.open().map((run) => this.#queued(run, 0)));
    onEvent({
      kind: "begun",
      campaign: plan.campaign,
      runs: this.#ledger.runs,
      done: this.#ledger.done,
      workers: runner.size,
      deadlineMs: this.#deadlineMs,
    });
    this.#tellTally();
    if (this.#ledger.open().length === 0) return this.#begin("all-done");
    this.#watchDeadline();
    if (this.#end !== null) return;
    this.#reconciler = setInterval(() => this.#reconcile(), RECONCILE_MS);
    this.#consumer = this.#queue.consume({
      size: runner.size,
      handle: (ticket) => this.#handle(ticket),
      onError: (error) => this.#meetInQueue(error),
    });
  }

  /** Ends the night: what runs is checkpointed. */
  stop(): void {
    this.#begin("stopped");
  }

  #watchDeadline(): void {
    if (this.#deadlineMs === null || this.#end !== null) return;
    const left = this.#deadlineMs - this.#options.now();
    if (left <= 0) this.#begin("deadline");
    else this.#timer = setTimeout(() => this.#watchDeadline(), Math.min(left, DEADLINE_LOOK_MS));
  }

  /** Begins to end, once; the first reason counts. */
  #begin(end: NightEnd): void {
    if (this.#end !== null) return;
    this.#end = end;
    for (const timer of [this.#timer, this.#reconciler]) if (timer !== null) clearTimeout(timer);
    this.#abort.abort();
    this.#windDown().then(
      (summary) => {
        if (this.#bug !== null) return this.#settle?.reject(this.#bug);
        this.#options.onEvent({ kind: "ended", summary });
        this.#settle?.resolve(summary);
      },
      (error: unknown) => this.#settle?.reject(this.#bug ?? error),
    );
  }

  async #windDown(): Promise<NightSummary> {
    await this.#consumer?.close();
    const { folder, plan, now } = this.#options;
    const ledger = this.#ledger;
    const standing = this.#end === "all-done" ? "done" : this.#end === "stopped" ? "stopped" : "paused";
    try {
      await folder.store.setStanding(plan.campaign, standing);
    } catch (error) {
      // A full disk has been told already, and the next launch sets the standing anyway.
      if (!isDiskFull(error)) throw error;
    }
    return {
      campaign: plan.campaign,
      endedBy: this.#end!,
      trouble: this.#trouble,
      startedMs: this.#startedMs,
      endedMs: now(),
      runs: ledger.runs,
      done: ledger.done,
      verdicts: ledger.verdicts(),
      legs: ledger.legs,
      computeSeconds: ledger.computeSeconds,
      savedSeconds: ledger.savedSeconds,
    };
  }

  async #handle(ticket: LegTicket): Promise<void> {
    // Delivered twice while it is computed: the one that computes it will do.
    if (this.#end !== null || this.#inFlight.has(ticket.runId)) return;
    this.#inFlight.add(ticket.runId);
    const worker = this.#slots.indexOf(null);
    this.#slots[worker] = ticket.runId;
    let next: QueuedLeg | null = null;
    try {
      if (!this.#diskIsLow()) next = await this.#leg(ticket, worker);
    } catch (error) {
      this.#meet(error);
    } finally {
      this.#inFlight.delete(ticket.runId);
      this.#slots[worker] = null;
      this.#options.onEvent({ kind: "idle", worker });
    }
    // Only now, since another worker may take it at once.
    if (next !== null && this.#end === null)
      await this.#queue.add([next]).catch((error: unknown) => this.#meetInQueue(error));
    this.#endIfNothingIsLeft();
  }

  /** Has one leg computed and commits it; returns the run's next leg, null for none. */
  async #leg(ticket: LegTicket, worker: number): Promise<QueuedLeg | null> {
    const { folder, plan, runner, legSeconds } = this.#options;
    const { campaign, runId, attempt, legs } = ticket;
    const claim = await folder.store.claim(campaign, runId, attempt, legs);
    if (claim === null) return null;
    const order = legOrderOf(claim, { plan, folder: folder.dir, budgetSeconds: legSeconds ?? LEG_SECONDS });
    this.#tellProgress(claim, worker, null);
    const ending = await runner.run(order, {
      signal: this.#abort.signal,
      onProgress: (progress) => this.#tellProgress(claim, worker, progress),
    });
    this.#ledger.live(runId, null);
    const commit = await this.#commitOf(claim, ending);
    const seconds = ending.kind === "reported" ? ending.report.seconds : 0;
    if (this.#aside.has(runId)) return null;
    const committed = commit === null ? null : await this.#commit(claim, commit, seconds);
    if (this.#end !== null) return null;
    // A leg that came to nothing is repeated from the last checkpoint, as the store has it now.
    const run = committed ?? (await folder.store.campaignRun(campaign, runId));
    return run.state === "done" ? null : this.#queued(run, committed === null ? ticket.tries + 1 : 0);
  }

  /** What to write after a leg; null when nothing of it counts. */
  async #commitOf(claim: LegClaim, ending: LegEnding): Promise<LegCommit | null> {
    const { folder, plan, now } = this.#options;
    const { runId } = claim.run;
    if (ending.kind === "died") {
      if (!ending.fromOutside) return commitOfDeath(claim, ending, now());
      // Killed because the night ends and it would not stop: that says nothing about the run.
      if (this.#end !== null) return null;
      const deaths = await folder.store.countDeath(claim.campaign, runId);
      return deaths < DEATHS_MAX ? null : commitOfDeath(claim, ending, now());
    }
    const { report } = ending;
    if (report.outcome === "disk-full") {
      this.#meet(diskFull(folder.dir));
      return null;
    }
    if (report.outcome === "damaged") {
      this.#setAside(claim.run, report.message ?? "a file is damaged");
      return null;
    }
    return commitOfReport(claim, report, plan, now());
  }

  /** Writes a leg and tells what came of it; null when somebody else has claimed the attempt since. */
  async #commit(claim: LegClaim, commit: LegCommit, seconds: number): Promise<CampaignRun | null> {
    const { folder, onEvent } = this.#options;
    const { history, checkpoint } = commit.computed ?? { history: null, checkpoint: null };
    if ((await folder.store.commit(commit)) === "stale") {
      for (const piece of [history, checkpoint]) this.#remove(piece?.file);
      return null;
    }
    if (checkpoint !== null) this.#remove(claim.checkpoint?.file);
    const run = await folder.store.campaignRun(claim.campaign, claim.run.runId);
    const steps = (commit.computed?.steps ?? claim.attemptSteps) - claim.attemptSteps;
    this.#ledger.committed(run, { steps, seconds, cpuSeconds: commit.seconds });
    const { next } = commit;
    if (next.kind === "next-attempt")
      onEvent({
        kind: "attempt",
        run: nameOf(run),
        attempt: run.attempt,
        remedy: next.remedy.name,
        reason: next.reason,
      });
    if (next.kind === "done") onEvent({ kind: "run-done", run });
    this.#tellTally();
    return run;
  }

  #remove(file: string | undefined): void {
    if (file !== undefined) rmSync(join(this.#options.folder.dir, file), { force: true });
  }

  #queued(run: CampaignRun, tries: number): QueuedLeg {
    const { campaign, runId, attempt, legs } = run;
    return {
      ticket: { campaign, runId, attempt, legs, tries },
      priority: this.#ledger.priority(runId, this.#secondsLeft()),
    };
  }

  #secondsLeft(): number | null {
    return this.#deadlineMs === null ? null : (this.#deadlineMs - this.#options.now()) / 1000;
  }

  /** A run whose files are damaged waits until they are restored; the night goes on with the others. */
  #setAside(run: CampaignRun, words: string): void {
    this.#aside.add(run.runId);
    this.#trouble ??= {
      what: `run ${run.number} (${run.label}) was set aside: ${words}`,
      where: run.runId,
      fix: "Restore the files of the run from a copy and launch again.",
    };
    this.#options.onEvent({ kind: "notice", words: `run ${run.number} was set aside: ${words}` });
  }

  #diskIsLow(): boolean {
    const { folder, reserveBytes } = this.#options;
    if (freeBytes(folder.dir) >= (reserveBytes ?? RESERVE_BYTES)) return false;
    this.#meet(diskFull(folder.dir));
    return true;
  }

  /** A full disk pauses the night; anything else that was not expected ends it as a bug. */
  #meet(error: unknown): void {
    if (isDiskFull(error)) {
      const { message, where, fix } = diskFull(this.#options.folder.dir, error);
      this.#trouble ??= { what: message, where: where ?? "", fix: fix ?? "" };
      this.#begin("disk-full");
      return;
    }
    // While the night winds down the queue may complain about what was taken from it.
    if (this.#end === null) this.#bug ??= error;
    this.#begin("stopped");
  }

  /**
   * The queue is a cache. It may complain (a manager that slept past its locks, say) and even lose a ticket: what it says
   * is told, and the reconciler makes good what is missing. Only a queue that goes on complaining is a bug.
   */
  #meetInQueue(error: unknown): void {
    this.#queueTroubles += 1;
    if (isDiskFull(error) || this.#queueTroubles > QUEUE_TROUBLES_MAX) this.#meet(error);
    const words = error instanceof Error ? error.message : String(error);
    if (this.#end === null) this.#options.onEvent({ kind: "notice", words: `queue: ${words}` });
  }

  /** Rebuilds the queue from the store when runs are open and nothing has been taken for a while. */
  #reconcile(): void {
    const idle = this.#inFlight.size === 0 && this.#end === null;
    if (idle && this.#wasIdle) this.#rebuild().catch((error: unknown) => this.#meetInQueue(error));
    this.#wasIdle = idle;
  }

  async #rebuild(): Promise<void> {
    this.#rebuilds += 1;
    const { list } = await this.#options.folder.store.campaignState(this.#options.plan.campaign);
    const open = list.filter((run) => run.state !== "done" && !this.#aside.has(run.runId));
    // A ticket that is still there is not replaced; one that was taken and forgotten has another name now.
    await this.#queue.add(open.map((run) => this.#queued(run, REBUILT + this.#rebuilds)));
  }

  #endIfNothingIsLeft(): void {
    const left = this.#ledger.open().filter((run) => !this.#aside.has(run.runId));
    if (left.length === 0) this.#begin(this.#aside.size > 0 ? "damaged" : "all-done");
  }

  #tellProgress(claim: LegClaim, worker: number, progress: LegProgress | null): void {
    const { run } = claim;
    this.#ledger.live(run.runId, progress);
    this.#options.onEvent({
      kind: "progress",
      worker,
      run: nameOf(run),
      attempt: claim.attempt,
      step: progress?.step ?? claim.attemptSteps,
      longestSteps: progress?.longestSteps ?? run.longestSteps,
      secondsLeft: this.#ledger.secondsLeft(run.runId),
    });
    if (performance.now() - this.#toldMs >= TALLY_MS) this.#tellTally();
  }

  #tellTally(): void {
    const { runner, now, onEvent } = this.#options;
    this.#toldMs = performance.now();
    const night = { workers: runner.size, nowMs: now(), deadlineMs: this.#deadlineMs };
    onEvent({
      kind: "tally",
      runs: this.#ledger.runs,
      done: this.#ledger.done,
      verdicts: this.#ledger.verdicts(),
      predictedEndMs: this.#ledger.predictedEndMs(night),
    });
  }
}

function nameOf({ runId, number, label }: CampaignRun): RunName {
  return { runId, number, label };
}
