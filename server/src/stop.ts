/**
 * On the first request to stop (SIGTERM, Ctrl-C) runs `stop` and ends the process well; when that takes longer than `patienceMs`, fails, or
 * stopping is asked for again, ends it at once.
 */
export function stopOnSignal(stop: () => Promise<void>, patienceMs: number): void {
  let asked = false;
  const onSignal = (): void => {
    if (asked) process.exit(1);
    asked = true;
    setTimeout(() => process.exit(1), patienceMs).unref();
    stop().then(
      () => process.exit(0),
      () => process.exit(1),
    );
  };
  for (const signal of ['SIGTERM', 'SIGINT'] as const) process.on(signal, onSignal);
}
