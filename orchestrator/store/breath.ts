import { setImmediate as nextTurn } from "node:timers/promises";

/**
 * Lets timers and sockets in. An in-process database answers in microtasks only, so that a busy stretch of queries would
 * starve everything else of the process; after `everyMs` of such a stretch the next caller waits for one turn of the
 * event loop.
 */
export function createBreath(everyMs: number, clock: () => number = performance.now.bind(performance)) {
  let last = clock();
  let turn: Promise<void> | null = null;
  return async (): Promise<void> => {
    if (turn === null && clock() - last < everyMs) return;
    turn ??= nextTurn().then(() => {
      last = clock();
      turn = null;
    });
    await turn;
  };
}
