/** What is done about a session whose cookie was copied; the module of accounts knows. */
export interface StolenSessions {
  end(sessionId: string, userId: string): Promise<void>;
}
export const STOLEN_SESSIONS = Symbol('stolen sessions');
