/** Asks the person to sign in again, over the page they are on; resolves to whether they did. */
type AskSignIn = () => Promise<boolean>;

let ask: AskSignIn | null = null;
let asking: Promise<boolean> | null = null;

/** Called by the shell while it is shown; before that a request that needs a session simply fails. */
export function onSignedOut(handler: AskSignIn): () => void {
  ask = handler;
  return () => {
    if (ask === handler) ask = null;
  };
}

/** One dialog, however many requests were refused at once; each of them is sent again when it ends well. */
export function signInAgain(): Promise<boolean> {
  if (!ask) return Promise.resolve(false);
  asking ??= ask().finally(() => {
    asking = null;
  });
  return asking;
}
