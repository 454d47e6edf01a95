import type { ExampleDto } from "@heddle/backend/contract";
import { useState } from "react";
import { useNavigate } from "react-router-dom";
import { MayButton } from "../components/may-button";
import { Page } from "../components/page";
import { PageHeader } from "../components/page-header";
import { hasNothing, QueryProblem } from "../components/query-problem";
import { ExampleCards, useExamples } from "../features/gallery";
import { AddToProjectDialog, NewProjectDialog } from "../features/projects";
import { thumb } from "./drawings";

/** The examples that come with the product. */
export function GalleryPage() {
  const examples = useExamples();
  const navigate = useNavigate();
  const [open, setOpen] = useState<{ what: "project" | "scene"; example: ExampleDto } | null>(null);
  const close = (): void => setOpen(null);
  return (
    <Page
      title="Examples"
      lead="Sections to open, run and take apart. Each is copied into a project of yours; the example itself stays as it is."
      foot="Each example is also a folder of the program with its scene file, and can be solved from the command line."
    >
      <PageHeader crumbs={[{ label: "Examples" }]} />
      <QueryProblem query={examples} />
      {hasNothing(examples) ? null : (
        <ExampleCards
          examples={examples.data}
          thumb={thumb}
          actions={(example) => (
            <>
              <MayButton permission="scene.edit" onClick={() => setOpen({ what: "project", example })}>
                Start a project with it
              </MayButton>
              <MayButton
                permission="scene.edit"
                variant="text"
                onClick={() => setOpen({ what: "scene", example })}
              >
                Add to a project…
              </MayButton>
            </>
          )}
        />
      )}
      {open?.what === "project" ? (
        <NewProjectDialog
          examples={examples.data}
          initialExample={open.example.name}
          thumb={thumb}
          onCreated={(project) => void navigate(`/projects/${project.id}`)}
          onClose={close}
        />
      ) : null}
      {open?.what === "scene" ? (
        <AddToProjectDialog
          example={open.example}
          onCreated={(sceneId) => void navigate(`/scenes/${sceneId}`)}
          onClose={close}
        />
      ) : null}
    </Page>
  );
}
