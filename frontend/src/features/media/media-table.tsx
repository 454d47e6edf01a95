import Link from "@mui/material/Link";
import type { Medium } from "@heddle/kernels/scene";
import { isPerfect } from "@heddle/kernels/scene";
import type { ReactNode } from "react";
import { useMemo } from "react";
import type { Column } from "../../components/data-table";
import { DataTable } from "../../components/data-table";
import { MoreMenu } from "../../components/more-menu";
import { useSession } from "../../hooks/session";
import { figure } from "../../lib/figures";
import { whyNot } from "../../lib/why-not";
import type { MediumFigures } from "@heddle/kernels/media";
import { counted } from "../../lib/words";
import type { LibraryMedium, Swatch } from "./api";
import {
  attenuationWords,
  figuresOf,
  impedanceWords,
  matchDistance,
  matchWords,
  reflectionWords,
  skinDepthWords,
} from "./meanings";

interface MediaTableProps {
  media: readonly LibraryMedium[] | undefined;
  gigahertz: number;
  search: string;
  /** A small cut of the medium, hatched as on the sheet. */
  swatch: Swatch;
  empty: ReactNode;
  onOpen: (entry: LibraryMedium) => void;
  onDelete: (entry: LibraryMedium) => void;
}

interface Row extends LibraryMedium {
  figures: MediumFigures | null;
}

const none = <span style={{ color: "var(--soft)" }}>–</span>;

function polesWords(medium: Medium): string {
  if (isPerfect(medium)) return `perfect ${medium.perfect} conductor`;
  const { electricPoles, magneticPoles } = medium;
  return [
    electricPoles.length === 0 ? "" : counted(electricPoles.length, "pole of ε", "poles of ε"),
    magneticPoles.length === 0 ? "" : counted(magneticPoles.length, "pole of μ", "poles of μ"),
  ]
    .filter(Boolean)
    .join(", ");
}

const constantColumn = (
  key: "relativePermittivity" | "relativePermeability" | "conductivity" | "magneticLoss",
  label: ReactNode,
  note: string,
): Column<Row> => {
  const value = ({ medium }: Row): number | null => (isPerfect(medium) ? null : medium[key]);
  return {
    key,
    label,
    note,
    value,
    align: "right",
    hideBelow: key === "relativePermittivity" || key === "relativePermeability" ? "tablet" : "phone",
    cell: (row) => {
      const at = value(row);
      return at === null ? none : <span className="figure">{figure(at)}</span>;
    },
  };
};

const meaningColumn = (
  key: string,
  label: ReactNode,
  note: string,
  value: (figures: MediumFigures) => number | null,
  words: (figures: MediumFigures) => string,
  hideBelow?: "phone" | "tablet" | "desktop",
): Column<Row> => ({
  key,
  label,
  note,
  align: "right",
  ...(hideBelow === undefined ? {} : { hideBelow }),
  value: ({ figures }) => (figures === null ? null : value(figures)),
  cell: ({ figures }) => (figures === null ? none : <span className="figure">{words(figures)}</span>),
});

/** The library with what each medium means at a frequency. */
export function MediaTable({ media, gigahertz, search, swatch, empty, onOpen, onDelete }: MediaTableProps) {
  const { role } = useSession();
  const rows = useMemo(
    () => media?.map((entry): Row => ({ ...entry, figures: figuresOf(entry.medium, gigahertz) })),
    [media, gigahertz],
  );
  const columns: readonly Column<Row>[] = [
    {
      key: "name",
      label: "Medium",
      note: "and the source of its figures",
      value: ({ medium, source }) => `${medium.name}\n${source}`,
      cell: (row) => (
        <div
          style={{
            display: "grid",
            gridTemplateColumns: "34px minmax(0, 1fr)",
            gap: 12,
            alignItems: "center",
          }}
        >
          {swatch(row.medium, gigahertz)}
          <div style={{ minWidth: 140 }}>
            <Link
              component="button"
              type="button"
              onClick={() => onOpen(row)}
              sx={{ fontWeight: 500, textAlign: "left" }}
            >
              {row.medium.name}
            </Link>
            <div style={{ color: "var(--soft)", fontSize: 12 }}>
              {[polesWords(row.medium), row.source].filter(Boolean).join(" · ")}
            </div>
          </div>
        </div>
      ),
      width: "30%",
    },
    constantColumn("relativePermittivity", <span style={{ textTransform: "none" }}>εr</span>, "1"),
    constantColumn("relativePermeability", <span style={{ textTransform: "none" }}>μr</span>, "1"),
    constantColumn("conductivity", <span style={{ textTransform: "none" }}>σ</span>, "S/m"),
    constantColumn("magneticLoss", <span style={{ textTransform: "none" }}>σ*</span>, "Ω/m"),
    meaningColumn("skin", "Skin depth", "1/α", (of) => of.skinDepthMm, skinDepthWords, "tablet"),
    meaningColumn("attenuation", "Loss", "dB/mm", (of) => of.attenuationDbPerMm, attenuationWords, "phone"),
    meaningColumn(
      "impedance",
      "Impedance",
      "η",
      (of) => Math.hypot(of.impedanceOhm.re, of.impedanceOhm.im),
      impedanceWords,
      "desktop",
    ),
    meaningColumn(
      "reflection",
      "Reflection",
      "from air",
      (of) => of.reflectionDb,
      reflectionWords,
      "desktop",
    ),
    meaningColumn("match", "Match", "σ/ε against σ*/μ", matchDistance, matchWords, "desktop"),
  ];
  return (
    <DataTable
      caption="Media"
      rows={rows}
      rowKey={(row) => row.id}
      columns={columns}
      initialSort={{ key: "name", descending: false }}
      search={search}
      empty={empty}
      actions={(row) => (
        <MoreMenu
          label={`More for ${row.medium.name}`}
          items={[
            {
              label: whyNot(role, "scene.edit") === null ? "Edit…" : "Look at its figures…",
              onClick: () => onOpen(row),
            },
            { label: "Delete…", onClick: () => onDelete(row), refused: whyNot(role, "scene.edit") },
          ]}
        />
      )}
    />
  );
}
