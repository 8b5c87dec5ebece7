/** After a request to stop: ends the process hard when stopping takes too long, or when asked a second time. */
export function exitWithin(milliseconds: number): void {
  let asked = false;
  for (const signal of ['SIGTERM', 'SIGINT'] as const) {
    process.on(signal, () => {
      if (asked) process.exit(1);
      asked = true;
      setTimeout(() => process.exit(1), milliseconds).unref();
    });
  }
}
