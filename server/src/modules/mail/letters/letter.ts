/** A message before it becomes text and HTML: plain text in every part. */
export interface Letter {
  readonly subject: string;
  readonly paragraphs: readonly string[];
  /** words of a person, set apart */
  readonly quote?: string;
  readonly link?: { readonly label: string; readonly address: string };
  /** why this came, and what to do if it should not have */
  readonly small: readonly string[];
}
