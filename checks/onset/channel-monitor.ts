import type { OnsetKind } from "../../orchestrator/contract/index.ts";
import type { AlarmSource, ChannelBound, OnsetAlarm } from "./alarm.ts";
import { BlockReader, type BlockReading } from "./block-reader.ts";
import { DUST_SHARE } from "./dust.ts";
import { ExpandingReference } from "./expanding-reference.ts";
import { Guard } from "./guard.ts";
import { MeanShift } from "./mean-shift.ts";
import type { MonitorLayout } from "./monitor-layout.ts";
import { MonotoneGrowth } from "./monotone-growth.ts";
import { ScaleBand } from "./scale-band.ts";
import { SpikeCluster } from "./spike-cluster.ts";
import { SPIKE_LIMIT } from "./spike-flags.ts";

/** Growth must reach this share of the level before it matters to an average. */
const MATTERS_SHARE = 1e-3;

/** A spike must be this many times what matters of a fluctuation. */
const SPIKE_MATTERS = 5;
/** Fluctuations up to this many of the smallest steps that a channel ever takes are its resolution, as in a count. */
const RESOLUTION_STEPS = 2;

/** What one channel's monitor is told. */
export interface ChannelMonitorOptions {
  readonly channel: string;
  readonly layout: MonitorLayout;
  readonly bound: ChannelBound;
  readonly sensitivity: number;
}

/**
 * All monitors of one channel: sample by sample for non-finite values, bounds and guards; block by block for growth,
 * spikes and shifts of the mean. Each kind of alarm is given once.
 *
 * Cost is constant a sample and memory bounded by the layout, whatever the length of the run.
 */
export class ChannelMonitor {
  readonly alarms: OnsetAlarm[] = [];
  private index = -1;
  private last = Number.NaN;
  /** Smallest change between neighbours so far. */
  private quantum = Number.POSITIVE_INFINITY;
  private readonly options: ChannelMonitorOptions;
  private readonly blocks: BlockReader;
  private readonly guard: Guard;
  private readonly differenced: ScaleBand;
  private readonly plain: ScaleBand;
  private readonly monotone: MonotoneGrowth;
  private readonly shift: MeanShift;
  private readonly spikes: SpikeCluster;
  private readonly levels = new ExpandingReference();
  private readonly sizes = new ExpandingReference();
  private readonly waiting: number[] = [];
  private lowest = Number.POSITIVE_INFINITY;
  private highest = Number.NEGATIVE_INFINITY;

  constructor(options: ChannelMonitorOptions) {
    const { layout, sensitivity } = options;
    this.options = options;
    this.blocks = new BlockReader(layout);
    this.guard = new Guard(sensitivity);
    const band = (allowance: number, threshold: number) =>
      new ScaleBand({
        allowanceMin: allowance * sensitivity,
        threshold: threshold * sensitivity,
        sensitivity,
        arming: layout.arming,
      });
    this.differenced = band(Math.log(1.6), 2.4);
    this.plain = band(Math.log(2), 3.4);
    this.monotone = new MonotoneGrowth(sensitivity);
    this.shift = new MeanShift(sensitivity);
    this.spikes = new SpikeCluster({ arming: layout.arming, sensitivity });
  }

  /** Whether there is a stable reference to compare with. */
  get armed(): boolean {
    return this.differenced.armed;
  }

  /** Single spikes seen so far, and the sample of the first. */
  get spikesSeen(): { count: number; first: number | null } {
    return { count: this.spikes.spikes, first: this.spikes.firstSpike };
  }

  /** Takes the next sample; returns the first alarm at it that stops the run, or null. */
  push(x: number): OnsetAlarm | null {
    this.index++;
    if (!Number.isFinite(x)) return this.raise("non-finite", "non-finite", this.index);
    const change = Math.abs(x - this.last);
    if (change > 0 && change < this.quantum) this.quantum = change;
    this.last = x;
    const before = this.alarms.length;
    const { min, max } = this.options.bound;
    if ((min !== undefined && x < min) || (max !== undefined && x > max)) {
      this.raise("bound", "blow-up", this.index);
    }
    if (this.guard.feed(x)) this.raise("guard", "blow-up", this.index - 4);
    if (this.blocks.feed(x)) this.endBlock(this.blocks.reading);
    for (let i = before; i < this.alarms.length; i++) if (this.alarms[i]!.stops) return this.alarms[i]!;
    return null;
  }

  private endBlock(reading: BlockReading): void {
    const { block } = this.options.layout;
    const start = this.index + 1 - block;
    const level = this.sizes.count > 0 ? this.sizes.median() : reading.size;
    const resolution = Number.isFinite(this.quantum) ? RESOLUTION_STEPS * this.quantum : 0;
    const matters = this.options.sensitivity * Math.max(MATTERS_SHARE * level, resolution);
    const floor = DUST_SHARE * level;
    this.watchScale(this.differenced, reading.differencedScale, floor, matters);
    this.watchScale(this.plain, reading.plainScale, floor, matters);
    if (this.monotone.feed(reading.middle, matters)) this.raise("monotone", "blow-up", start - 4 * block);
    const shifted = this.shift.feed(reading.middle, matters);
    if (shifted) this.raise("mean-shift", "mean-shift", this.index + 1 - shifted.blocksBack * block);
    this.watchSpikes(floor, matters);
    this.learn(reading);
  }

  private watchScale(band: ScaleBand, scale: number, floor: number, matters: number): void {
    const logScale = Math.log(Math.hypot(scale, floor) || Number.MIN_VALUE);
    if (!band.feed(logScale) || !(scale > matters)) return;
    const { block } = this.options.layout;
    this.raise("scale", "growing-oscillation", this.index + 1 - band.rising * block);
  }

  private watchSpikes(floor: number, matters: number): void {
    const usual = this.differenced.usual;
    const own = Math.log(Math.hypot(this.blocks.reading.differencedScale, floor));
    const noise = Math.exp(Number.isNaN(usual) ? own : Math.max(usual, own));
    const limit = Math.max(SPIKE_LIMIT * noise, SPIKE_MATTERS * matters);
    const flags = this.blocks.flags(limit, this.index);
    if (this.spikes.feed(flags)) {
      this.raise("spikes", "spike-cluster", this.spikes.clusterStart ?? this.index);
    }
  }

  /** The reference for levels and guards lags behind like all others. */
  private learn(reading: BlockReading): void {
    this.sizes.add(reading.size);
    this.waiting.push(reading.middle);
    if (this.waiting.length <= this.options.layout.arming.late) return;
    const settled = this.waiting.shift()!;
    this.levels.add(settled);
    this.lowest = Math.min(this.lowest, settled);
    this.highest = Math.max(this.highest, settled);
    if (!this.armed) return;
    const noise = 8 * Math.exp(this.differenced.usual);
    const width = Math.max(this.highest - this.lowest, noise, 0.3 * this.sizes.median());
    this.guard.arm(this.levels.median(), width);
  }

  private raise(source: AlarmSource, kind: OnsetKind, suspectIndex: number): OnsetAlarm | null {
    if (this.alarms.some((a) => a.source === source)) return null;
    const alarm = {
      channel: this.options.channel,
      alarmIndex: this.index,
      kind,
      source,
      suspectIndex: Math.max(0, suspectIndex),
      stops: source !== "mean-shift",
      armed: this.armed,
    };
    this.alarms.push(alarm);
    return alarm;
  }
}
