/** Every query of a team's data is within one programme; nothing is looked up by its id alone. */
export interface Scope {
  readonly programmeId: string;
}
