/**
 * Which zone may import which, besides itself. A zone is the longest folder prefix listed here; `npm` lists the packages
 * it may use (`*` for any), `node` whether it may use Node's own modules.
 */
export interface Zone {
  readonly imports: readonly string[];
  readonly npm: readonly string[] | "*";
  readonly node: boolean;
  /** Zones that may only be imported as types. */
  readonly typeOnly?: readonly string[];
}

export const ZONES: Readonly<Record<string, Zone>> = {
  "orchestrator/contract": { imports: [], npm: ["zod"], node: false },
  checks: { imports: ["orchestrator/contract"], npm: ["simple-statistics", "fft.js"], node: false },
  "workers/model": { imports: ["orchestrator/contract"], npm: ["ml-matrix"], node: false },
  workers: { imports: ["orchestrator/contract", "checks", "workers/model"], npm: "*", node: true },
  orchestrator: { imports: ["orchestrator/contract", "checks"], npm: "*", node: true },
  "orchestrator/cli": {
    imports: ["orchestrator/contract", "orchestrator", "checks", "workers", "workers/model", "api"],
    npm: "*",
    node: true,
  },
  api: { imports: ["orchestrator/contract", "orchestrator", "checks"], npm: "*", node: true },
  "api/board": {
    imports: ["orchestrator/contract"],
    npm: "*",
    node: false,
    typeOnly: ["orchestrator/contract"],
  },
};

/** Source roots that the table covers. */
export const ROOTS = ["orchestrator", "checks", "workers", "api"] as const;

/** Folders that may exist below the roots; a new folder is a decision to be written down here. */
export const FOLDERS: readonly string[] = [
  "api",
  "api/http",
  "checks",
  "checks/compare",
  "checks/estimators",
  "checks/mean",
  "checks/onset",
  "orchestrator",
  "orchestrator/cli",
  "orchestrator/cli/commands",
  "orchestrator/contract",
  "orchestrator/exports",
  "orchestrator/histories",
  "orchestrator/night",
  "orchestrator/planning",
  "orchestrator/plots",
  "orchestrator/queue",
  "orchestrator/store",
  "workers",
  "workers/model",
  "workers/model/circulations",
  "workers/model/describe",
  "workers/model/kernel",
  "workers/model/kernel/assembly",
  "workers/model/loads",
  "workers/model/path",
  "workers/model/record",
  "workers/model/rotor",
  "workers/model/state",
  "workers/model/wake",
  "workers/model/wing",
];
