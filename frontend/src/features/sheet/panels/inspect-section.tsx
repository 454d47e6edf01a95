import {
  type Edge,
  type EdgeName,
  isPerfect,
  type Mesh,
  type Polarization,
  type Scene,
} from "@heddle/kernels/scene";
import type { SheetEditor } from "../document/editor";
import { useSheet } from "../surface/use-sheet";
import { aboveZero, ChoiceField, FieldGrid, LengthField, NumberField } from "./fields";
import { InspectorHead } from "./inspect-common";

const EDGES: readonly [Edge, string][] = [
  ["absorbing", "absorbing"],
  ["electric", "electric"],
  ["magnetic", "magnetic"],
];
const EDGE_NAMES: readonly EdgeName[] = ["left", "right", "bottom", "top"];

/** Section, polarization, band, mesh and edges: what is shown while nothing is selected. */
export function SectionInspector({ editor }: { editor: SheetEditor }) {
  const readOnly = useSheet(editor, (state) => state.readOnly);
  const scene = useSheet(editor, (state) => state.document);
  const drawing = useSheet(editor, (state) => state.drawing);
  const put = (label: string, part: Partial<Scene>): void => {
    editor.edit(label, (before) => ({ ...before, ...part }));
  };
  const { section, band, edges } = scene;
  return (
    <>
      <InspectorHead title="Section" />
      <FieldGrid>
        <LengthField
          label="Width"
          value={section.widthMm}
          parameters={drawing.parameters}
          check={aboveZero}
          disabled={readOnly}
          onCommit={(widthMm) => {
            put("Resize the section", { section: { ...section, widthMm } });
          }}
        />
        <LengthField
          label="Height"
          value={section.heightMm}
          parameters={drawing.parameters}
          check={aboveZero}
          disabled={readOnly}
          onCommit={(heightMm) => {
            put("Resize the section", { section: { ...section, heightMm } });
          }}
        />
        <NumberField
          label="Band from"
          unit="GHz"
          value={band.fromGHz}
          disabled={readOnly}
          check={(GHz) =>
            GHz > 0 && GHz < band.toGHz ? null : `Give more than 0 and less than ${String(band.toGHz)} GHz.`
          }
          onCommit={(fromGHz) => {
            put("Change the band", { band: { ...band, fromGHz } });
          }}
        />
        <NumberField
          label="to"
          unit="GHz"
          value={band.toGHz}
          disabled={readOnly}
          check={(GHz) =>
            GHz > band.fromGHz && GHz <= 1e5 ? null : `Give more than ${String(band.fromGHz)} GHz.`
          }
          onCommit={(toGHz) => {
            put("Change the band", { band: { ...band, toGHz } });
          }}
        />
        <ChoiceField<Polarization>
          wide
          label="Polarization"
          value={scene.polarization}
          choices={[
            ["TMz", "TMz: Ez Hx Hy"],
            ["TEz", "TEz: Hz Ex Ey"],
          ]}
          disabled={readOnly}
          onCommit={(polarization) => {
            editor.edit("Change the polarization", (before) => withPolarization(before, polarization));
          }}
        />
        <ChoiceField<string>
          wide
          label="Background"
          value={scene.background}
          choices={[...drawing.mediaById.values()]
            .filter((medium) => !isPerfect(medium))
            .map(({ id, name }) => [id, name] as const)}
          disabled={readOnly}
          onCommit={(background) => {
            put("Change the background", { background });
          }}
        />
        <MeshFields
          mesh={scene.mesh}
          disabled={readOnly}
          onCommit={(mesh) => {
            put("Change the mesh", { mesh });
          }}
        />
        <h3 className="panel-subhead">Edges</h3>
        {EDGE_NAMES.map((name) => (
          <ChoiceField<Edge>
            key={name}
            label={`${name.charAt(0).toUpperCase()}${name.slice(1)}`}
            value={edges[name]}
            choices={EDGES}
            disabled={readOnly}
            onCommit={(edge) => {
              put("Change an edge", { edges: { ...edges, [name]: edge } });
            }}
          />
        ))}
        <h3 className="panel-subhead">Run ends</h3>
        <NumberField
          label="at"
          unit="ns"
          value={scene.stop.maxTimeNs}
          disabled={readOnly}
          check={(ns) => (ns > 0 && ns <= 1e9 ? null : "Give a time above 0 ns.")}
          onCommit={(maxTimeNs) => {
            put("Change the stop", { stop: { ...scene.stop, maxTimeNs } });
          }}
        />
        <NumberField
          label="or down"
          unit="dB"
          value={scene.stop.decayDb}
          disabled={readOnly}
          check={(dB) => (dB > 0 && dB <= 300 ? null : "Give a decay from 0 to 300 dB.")}
          onCommit={(decayDb) => {
            put("Change the stop", { stop: { ...scene.stop, decayDb } });
          }}
        />
      </FieldGrid>
    </>
  );
}

/** The same field of the other polarization: Ez becomes Hz, Hx becomes Ex, Hy becomes Ey, and back. */
const TWINS = { Ez: "Hz", Hx: "Ex", Hy: "Ey", Hz: "Ez", Ex: "Hx", Ey: "Hy" } as const;
const TM_FIELDS: readonly string[] = ["Ez", "Hx", "Hy"];

/** Point probes follow the polarization, for their old component would not exist. */
function withPolarization(scene: Scene, polarization: Polarization): Scene {
  return {
    ...scene,
    polarization,
    probes: scene.probes.map((probe) =>
      probe.kind === "point" && TM_FIELDS.includes(probe.field) !== (polarization === "TMz")
        ? { ...probe, field: TWINS[probe.field] }
        : probe,
    ),
  };
}

function MeshFields(props: { mesh: Mesh; disabled: boolean; onCommit: (mesh: Mesh) => void }) {
  const { mesh, disabled, onCommit } = props;
  const { metal } = mesh;
  const byCell = "cellMm" in mesh;
  return (
    <>
      <ChoiceField<"cell" | "wavelength">
        label="Mesh"
        value={byCell ? "cell" : "wavelength"}
        choices={[
          ["wavelength", "by λ"],
          ["cell", "by size"],
        ]}
        disabled={disabled}
        onCommit={(by) => {
          if (by === "cell" && !byCell) onCommit({ cellMm: 1, metal });
          if (by === "wavelength" && byCell) onCommit({ cellsPerWavelength: 20, metal });
        }}
      />
      {byCell ? (
        <NumberField
          label="Cell"
          unit="mm"
          value={mesh.cellMm}
          disabled={disabled}
          check={aboveZero}
          onCommit={(cellMm) => {
            onCommit({ cellMm, metal });
          }}
        />
      ) : (
        <NumberField
          label="Cells"
          unit="per λ"
          value={mesh.cellsPerWavelength}
          disabled={disabled}
          check={(cells) => (cells >= 8 && cells <= 10_000 ? null : "Give at least 8 cells per wavelength.")}
          onCommit={(cellsPerWavelength) => {
            onCommit({ cellsPerWavelength, metal });
          }}
        />
      )}
    </>
  );
}
