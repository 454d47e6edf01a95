import Button from "@mui/material/Button";
import Dialog from "@mui/material/Dialog";
import DialogActions from "@mui/material/DialogActions";
import DialogContent from "@mui/material/DialogContent";
import DialogTitle from "@mui/material/DialogTitle";
import { useRef, useState } from "react";
import { Notice } from "../../components/notice";
import { Refusal } from "../../components/refusal";
import { counted } from "../../lib/words";
import { problemsOf } from "../../lib/api";
import { useCreateScene } from "./api";
import { readSceneFile } from "./scene-file";

interface ImportSceneDialogProps {
  projectId: string;
  onCreated: (sceneId: string) => void;
  onClose: () => void;
}

/** Takes a scene file into the project; a refused one is shown with every problem it has. */
export function ImportSceneDialog({ projectId, onCreated, onClose }: ImportSceneDialogProps) {
  const create = useCreateScene();
  const input = useRef<HTMLInputElement>(null);
  const [fileName, setFileName] = useState<string | null>(null);
  const [sentence, setSentence] = useState<string | null>(null);
  const [over, setOver] = useState(false);
  const take = async (file: File | undefined): Promise<void> => {
    if (file === undefined) return;
    create.reset();
    setFileName(file.name);
    const read = readSceneFile(await file.text());
    setSentence("sentence" in read ? read.sentence : null);
    if ("document" in read) {
      create.mutate(
        { params: { path: { projectId } }, body: { document: read.document } },
        { onSuccess: (scene) => onCreated(scene.id) },
      );
    }
  };
  const problems = problemsOf(create.error).length;
  return (
    <Dialog open onClose={onClose} maxWidth="sm" fullWidth aria-labelledby="import-title">
      <DialogTitle id="import-title">Import a scene file</DialogTitle>
      <DialogContent>
        <div
          onDragOver={(event) => {
            event.preventDefault();
            setOver(true);
          }}
          onDragLeave={() => setOver(false)}
          onDrop={(event) => {
            event.preventDefault();
            setOver(false);
            void take(event.dataTransfer.files[0]);
          }}
          style={{
            display: "grid",
            justifyItems: "center",
            gap: 10,
            padding: "28px 20px",
            border: `1px dashed ${over ? "var(--accent)" : "var(--control)"}`,
            background: over ? "var(--accent-wash)" : "var(--sheet)",
          }}
        >
          <Button autoFocus onClick={() => input.current?.click()} disabled={create.isPending}>
            Choose a file
          </Button>
          <span style={{ color: "var(--soft)" }}>or drop it here: a scene document, JSON, up to 2 MB</span>
          <input
            ref={input}
            type="file"
            accept=".json,application/json"
            aria-label="Scene file"
            className="visually-hidden"
            tabIndex={-1}
            onChange={(event) => {
              void take(event.target.files?.[0]);
              event.target.value = "";
            }}
          />
        </div>
        {fileName === null ? null : (
          <p style={{ margin: "12px 0 8px" }} aria-live="polite">
            <span className="figure">{fileName}</span>
            {create.isPending ? ": being read…" : null}
            {problems > 0 ? `: ${counted(problems, "problem")}` : null}
          </p>
        )}
        {sentence === null ? null : <Notice tone="limit">{sentence}</Notice>}
        {create.isError ? <Refusal error={create.error} /> : null}
      </DialogContent>
      <DialogActions>
        <Button variant="text" onClick={onClose}>
          Close
        </Button>
      </DialogActions>
    </Dialog>
  );
}
