import type { ExampleDto } from "@heddle/backend/contract";
import Button from "@mui/material/Button";
import Dialog from "@mui/material/Dialog";
import DialogActions from "@mui/material/DialogActions";
import DialogContent from "@mui/material/DialogContent";
import DialogTitle from "@mui/material/DialogTitle";
import MenuItem from "@mui/material/MenuItem";
import TextField from "@mui/material/TextField";
import { useState } from "react";
import { QueryProblem } from "../../components/query-problem";
import { Refusal } from "../../components/refusal";
import { useCreateScene, useProjects } from "./api";

interface AddToProjectDialogProps {
  example: ExampleDto;
  onCreated: (sceneId: string) => void;
  onClose: () => void;
}

/** Copies an example into a project that is there already. */
export function AddToProjectDialog({ example, onCreated, onClose }: AddToProjectDialogProps) {
  const projects = useProjects();
  const [chosen, setChosen] = useState("");
  const create = useCreateScene();
  return (
    <Dialog open onClose={onClose} maxWidth="xs" fullWidth aria-labelledby="add-title">
      <DialogTitle id="add-title">Add “{example.title}”</DialogTitle>
      <DialogContent>
        <QueryProblem query={projects} />
        {projects.data?.length === 0 ? "There is no project yet; start one with this example instead." : null}
        {projects.data !== undefined && projects.data.length > 0 ? (
          <TextField
            select
            label="Project"
            value={chosen}
            sx={{ mt: "6px" }}
            onChange={(event) => setChosen(event.target.value)}
          >
            {projects.data.map((project) => (
              <MenuItem key={project.id} value={project.id}>
                {project.name}
              </MenuItem>
            ))}
          </TextField>
        ) : null}
        {create.isError ? (
          <div style={{ marginTop: 14 }}>
            <Refusal error={create.error} />
          </div>
        ) : null}
      </DialogContent>
      <DialogActions>
        <Button variant="text" onClick={onClose}>
          Cancel
        </Button>
        <Button
          variant="contained"
          color="primary"
          disabled={chosen === "" || create.isPending}
          onClick={() =>
            create.mutate(
              { params: { path: { projectId: chosen } }, body: { example: example.name } },
              { onSuccess: (scene) => onCreated(scene.id) },
            )
          }
        >
          Add and open
        </Button>
      </DialogActions>
    </Dialog>
  );
}
