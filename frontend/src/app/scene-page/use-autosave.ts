import type { SceneDto } from "@heddle/backend/contract";
import type { Scene } from "@heddle/kernels/scene";
import { useQueryClient } from "@tanstack/react-query";
import { useEffect, useState, useSyncExternalStore } from "react";
import type { SheetEditor } from "../../features/sheet";
import { saveScene } from "./api";
import type { Draft, SaveState } from "./autosave";
import { Autosave } from "./autosave";
import { draftsOf } from "./drafts";

export interface UseAutosaveOptions {
  editor: SheetEditor;
  scene: SceneDto;
  /** The scene's document with its defaults filled in, as the editor began with it. */
  document: Scene;
  personId: string;
  readOnly: boolean;
}

export interface AutosaveHandle {
  autosave: Autosave;
  state: SaveState;
  /** The scene as the server last gave it. */
  standing: SceneDto;
  setStanding: (scene: SceneDto) => void;
  /** Changes of an earlier visit that never reached the server. */
  draft: Draft | null;
  dropDraft: () => void;
}

const isOfProjects = (path: unknown): boolean => typeof path === "string" && path.startsWith("/api/projects");

/** Autosave of one scene, fed by the editor's finished gestures. */
export function useAutosave({
  editor,
  scene,
  document,
  personId,
  readOnly,
}: UseAutosaveOptions): AutosaveHandle {
  const client = useQueryClient();
  const [standing, setStanding] = useState(scene);
  const [made] = useState(() => {
    const drafts = draftsOf(scene.id, personId);
    const found = readOnly ? null : drafts.read();
    // A draft that says what the server already holds has nothing to offer.
    const differs = found !== null && JSON.stringify(found.document) !== JSON.stringify(document);
    if (found !== null && !differs) drafts.clear();
    const autosave = new Autosave({
      scene,
      document,
      save: (drawn, baseRevision) => saveScene(scene.id, drawn, baseRevision),
      drafts,
      onSaved: (saved) => {
        setStanding(saved);
        // Lists that show this scene are asked for anew when they are next looked at.
        void client.invalidateQueries({
          predicate: ({ queryKey }) => isOfProjects(queryKey[1]),
          refetchType: "none",
        });
      },
    });
    return { autosave, drafts, found: differs ? found : null };
  });
  const { autosave, drafts } = made;
  const [draft, setDraft] = useState(made.found);
  const state = useSyncExternalStore(autosave.subscribe, autosave.getState);

  useEffect(
    () =>
      editor.onChange((drawn) => {
        autosave.change(drawn);
      }),
    [editor, autosave],
  );
  useEffect(() => {
    const onOnline = (): void => {
      void autosave.flush();
    };
    globalThis.addEventListener("online", onOnline);
    return () => {
      globalThis.removeEventListener("online", onOnline);
      autosave.close();
    };
  }, [autosave]);

  return {
    autosave,
    state,
    standing,
    setStanding,
    draft,
    dropDraft: () => {
      if (autosave.waiting === null) drafts.clear();
      setDraft(null);
    },
  };
}
