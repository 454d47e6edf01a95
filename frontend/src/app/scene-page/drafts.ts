import { z } from "zod";
import type { DraftStore } from "./autosave";

const draftSchema = z.object({ baseRevision: z.int(), document: z.unknown(), at: z.string() });

/** Drafts of one scene in this browser's storage; where it is full or forbidden there are none, and saving goes on. */
export function draftsOf(sceneId: string, personId: string, storage: Storage = localStorage): DraftStore {
  const key = `heddle.draft.${personId}.${sceneId}`;
  return {
    read() {
      try {
        const text = storage.getItem(key);
        if (text === null) return null;
        const read = draftSchema.safeParse(JSON.parse(text));
        return read.success ? read.data : null;
      } catch {
        // Unreadable text is no draft.
        return null;
      }
    },
    write(draft) {
      try {
        storage.setItem(key, JSON.stringify(draft));
      } catch {
        // A full or forbidden storage leaves the server as the only keeper.
      }
    },
    clear() {
      try {
        storage.removeItem(key);
      } catch {
        // As above.
      }
    },
  };
}
