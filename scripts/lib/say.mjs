const started = Date.now();

/** One line of progress on standard error, with the seconds since the start. */
export function say(text) {
  const seconds = ((Date.now() - started) / 1000).toFixed(1).padStart(5);
  process.stderr.write(`${seconds} s  ${text}\n`);
}

/** A failure that a person can mend: its message is printed without a stack, and the process exits with 1. */
export class Complaint extends Error {}

/** Runs a script's story and turns what goes wrong into a message and an exit status. */
export async function tell(story) {
  try {
    await story();
  } catch (error) {
    process.stderr.write(`\n${error instanceof Complaint ? error.message : (error?.stack ?? error)}\n`);
    process.exitCode = 1;
  }
}
