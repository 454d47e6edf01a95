import { useState } from "react";
import { MayButton } from "../components/may-button";
import { Page } from "../components/page";
import { PageHeader } from "../components/page-header";
import { hasNothing, QueryProblem } from "../components/query-problem";
import { SearchField } from "../components/search-field";
import type { LibraryMedium } from "../features/media";
import {
  DeleteMediumDialog,
  FigureField,
  MediaTable,
  MediumDialog,
  StackPanel,
  useMedia,
} from "../features/media";
import { useMay } from "../hooks/session";
import { frequency, readNumber } from "../lib/figures";
import { counted } from "../lib/words";

import { swatch } from "./drawings";

type Open = { what: "new" } | { what: "edit" | "delete"; entry: LibraryMedium } | null;

/** The workspace's library of media and what they mean at a frequency. */
export function MediaPage() {
  const media = useMedia();
  const mayEdit = useMay("scene.edit");
  const [search, setSearch] = useState("");
  const [typed, setTyped] = useState("1");
  const [gigahertz, setGigahertz] = useState(1);
  const [open, setOpen] = useState<Open>(null);
  const close = (): void => setOpen(null);
  const read = readNumber(typed);
  const valid = read !== null && read > 0 && read <= 1e5;
  return (
    <Page
      title="Media"
      lead={
        media.data === undefined
          ? "What sections are painted with, and what it means to a wave"
          : `${counted(media.data.length, "medium", "media")}, and what they mean to a wave at ${frequency(gigahertz)}`
      }
      tools={
        <>
          <div style={{ width: 128 }}>
            <FigureField
              label="At frequency"
              unit="GHz"
              value={typed}
              fault={valid ? undefined : "Above 0, to 10⁵ GHz."}
              onChange={(text) => {
                setTyped(text);
                const value = readNumber(text);
                if (value !== null && value > 0 && value <= 1e5) setGigahertz(value);
              }}
            />
          </div>
          <SearchField label="Search media" value={search} onChange={setSearch} />
          <MayButton
            permission="scene.edit"
            variant="contained"
            color="primary"
            onClick={() => setOpen({ what: "new" })}
          >
            New medium
          </MayButton>
        </>
      }
      foot="For a plane wave in the unbounded medium: skin depth is the depth at which the field has fallen to 1/e; reflection is at right angles from air onto a half-space; matched means σ/ε = σ*/μ, where loss alone reflects nothing. Strokes falling to the right mark electric loss, rising ones magnetic loss, closer ones more of it."
    >
      <PageHeader crumbs={[{ label: "Media" }]} />
      <QueryProblem query={media} />
      {hasNothing(media) ? null : (
        <MediaTable
          media={media.data}
          gigahertz={gigahertz}
          search={search}
          swatch={swatch}
          empty={
            mayEdit
              ? "No media yet. Scenes always have air and a perfect conductor; add what else you paint with."
              : "No media yet. An engineer or the owner can add some; scenes always have air and a perfect conductor."
          }
          onOpen={(entry) => setOpen({ what: "edit", entry })}
          onDelete={(entry) => setOpen({ what: "delete", entry })}
        />
      )}
      {media.data === undefined ? null : <StackPanel media={media.data.map(({ medium }) => medium)} />}
      {open?.what === "new" || open?.what === "edit" ? (
        <MediumDialog
          entry={open.what === "edit" ? open.entry : null}
          takenIds={new Set(["air", "pec", ...(media.data ?? []).map(({ medium }) => medium.id)])}
          gigahertz={gigahertz}
          swatch={swatch}
          onClose={close}
        />
      ) : null}
      {open?.what === "delete" ? <DeleteMediumDialog entry={open.entry} onClose={close} /> : null}
    </Page>
  );
}
