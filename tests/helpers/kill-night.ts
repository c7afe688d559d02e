import { type ChildProcess, spawn } from "node:child_process";
import { once } from "node:events";
import { readFileSync } from "node:fs";
import { createInterface } from "node:readline";
import { fileURLToPath } from "node:url";
import type { NightSummary } from "../../orchestrator/night/index.ts";
import { processAlive } from "../../orchestrator/store/process-alive.ts";
import type { NightProcessOptions } from "./night-process.ts";

const SCRIPT = fileURLToPath(new URL("./night-process.ts", import.meta.url));

/** Starts a night in a process of its own and kills it with SIGKILL where it waits; resolves once it and its children are gone. */
export async function killNightAt(options: NightProcessOptions): Promise<{ orphanMs: number }> {
  const child = spawn(process.execPath, ["--import", "tsx", SCRIPT, JSON.stringify(options)], {
    stdio: ["ignore", "pipe", "pipe"],
  });
  let complaint = "";
  child.stderr!.setEncoding("utf8").on("data", (text: string) => {
    complaint += text;
  });
  for await (const line of createInterface(child.stdout!)) {
    const word = JSON.parse(line) as { place: string; held?: boolean };
    if (word.held === true) return kill(child);
  }
  throw new Error(`the night ended before it came to ${JSON.stringify(options.holdAt)}: ${complaint}`);
}

/**
 * Starts a night in a process of its own, stops it with SIGSTOP in a leg and lets it go on after a while, as a computer does
 * that sleeps; resolves with what the night came to.
 */
export async function sleepInNight(options: NightProcessOptions, sleepMs: number): Promise<NightSummary> {
  const child = spawn(process.execPath, ["--import", "tsx", SCRIPT, JSON.stringify(options)], {
    stdio: ["ignore", "pipe", "inherit"],
  });
  let slept = false;
  for await (const line of createInterface(child.stdout!)) {
    const word = JSON.parse(line) as { place: string; summary?: NightSummary };
    if (word.summary !== undefined) return word.summary;
    if (word.place !== "in-leg" || slept) continue;
    slept = true;
    child.kill("SIGSTOP");
    setTimeout(() => child.kill("SIGCONT"), sleepMs);
  }
  throw new Error("the night ended without a word");
}

async function kill(child: ChildProcess): Promise<{ orphanMs: number }> {
  const children = childrenOf(child.pid!);
  const gone = once(child, "close");
  child.kill("SIGKILL");
  const killed = performance.now();
  await gone;
  while (children.some((pid) => processAlive(pid, null))) {
    if (performance.now() - killed > 10_000) throw new Error(`children ${children} outlive their manager`);
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
  return { orphanMs: performance.now() - killed };
}

/** Numbers of a process's children, as Linux tells them. */
export function childrenOf(pid: number): number[] {
  const text = readFileSync(`/proc/${pid}/task/${pid}/children`, "utf8");
  return text
    .split(" ")
    .filter((word) => word !== "")
    .map(Number);
}
