import type { SceneDto, StaleRevisionDto } from "@heddle/backend/contract";
import { readScene } from "@heddle/kernels/scene";
import { useState } from "react";
import { useNavigate } from "react-router-dom";
import type { SheetEditor } from "../../features/sheet";
import { sentenceOf } from "../../lib/api";
import { copyScene } from "./api";
import type { Autosave } from "./autosave";
import { StaleDialog } from "./stale-dialog";

export interface ConflictProps {
  stale: StaleRevisionDto;
  editor: SheetEditor;
  autosave: Autosave;
  onStanding: (scene: SceneDto) => void;
}

/** Leads a person out of a conflict of two versions without losing either. */
export function Conflict({ stale, editor, autosave, onStanding }: ConflictProps) {
  const navigate = useNavigate();
  const [busy, setBusy] = useState(false);
  const [failure, setFailure] = useState<string | null>(null);

  const takeTheirs = (): void => {
    const read = readScene(stale.current.document);
    if (!read.ok) {
      setFailure(
        `Their version cannot be read here: ${read.problems[0]?.sentence ?? ""} Keep yours as a copy.`,
      );
      return;
    }
    autosave.adopt(stale.current, read.scene);
    onStanding(stale.current);
    // As one step of history, so that undo brings the own version back.
    editor.edit(`Take revision ${stale.current.revision.toString()}`, () => read.scene);
  };

  const keepCopy = async (): Promise<void> => {
    setBusy(true);
    setFailure(null);
    try {
      const mine = autosave.waiting ?? editor.document;
      const copy = await copyScene(stale.current.id, `${mine.name}, my copy`.slice(0, 200), mine);
      const read = readScene(stale.current.document);
      autosave.adopt(stale.current, read.ok ? read.scene : editor.document);
      await navigate(`/scenes/${copy.id}`);
    } catch (error) {
      setFailure(sentenceOf(error));
      setBusy(false);
    }
  };

  return (
    <StaleDialog
      stale={stale}
      busy={busy}
      failure={failure}
      onTakeTheirs={takeTheirs}
      onKeepCopy={() => void keepCopy()}
    />
  );
}
