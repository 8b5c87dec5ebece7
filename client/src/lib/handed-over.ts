/** Files dropped on one page and read on the next; a page's address cannot carry them. */
let waiting: readonly File[] = [];

export function handOver(files: readonly File[]): void {
  waiting = files;
}

/** Gives them once. */
export function takeHandedOver(): readonly File[] {
  const files = waiting;
  waiting = [];
  return files;
}
