/** Tells the app that a request met an ended session, so that it can offer to sign in without leaving the page. */
type Listener = () => void;

const listeners = new Set<Listener>();

export function onSignedOut(listener: Listener): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

export const reportSignedOut = (): void => {
  for (const listener of listeners) listener();
};
