import CloseOutlined from "@mui/icons-material/CloseOutlined";
import Button from "@mui/material/Button";
import IconButton from "@mui/material/IconButton";
import TextField from "@mui/material/TextField";
import type { FillMedium } from "@heddle/kernels/scene";
import { FigureField } from "../figure-field";
import type { ElementDraft, StackDraft, StackFaults } from "./stack-draft";
import { mayAdd, METAL } from "./stack-draft";

interface StackLayersProps {
  draft: StackDraft;
  faults: StackFaults;
  media: ReadonlyMap<string, FillMedium>;
  onChange: (changes: Partial<StackDraft>) => void;
}

/** The stack from where the wave comes to what lies behind, one row a layer. */
export function StackLayers({ draft, faults, media, onChange }: StackLayersProps) {
  const { elements } = draft;
  const replace = (element: ElementDraft): void =>
    onChange({ elements: elements.map((old) => (old.key === element.key ? element : old)) });
  const add = (make: (key: number) => ElementDraft): void =>
    onChange({ elements: [...elements, make(1 + Math.max(0, ...elements.map(({ key }) => key)))] });
  const options = [...media.values()].map(({ id, name }) => (
    <option key={id} value={id}>
      {name}
    </option>
  ));
  return (
    <div className="stack-layers">
      <ol aria-label="Layers in the order in which the wave meets them">
        {elements.map((element, index) => (
          <li key={element.key}>
            <span className="figure">{index + 1}</span>
            {element.kind === "layer" ? (
              <>
                <TextField
                  select
                  label="Medium"
                  value={element.mediumId}
                  slotProps={{ select: { native: true } }}
                  onChange={(event) => replace({ ...element, mediumId: event.target.value })}
                >
                  {media.has(element.mediumId) ? null : (
                    <option value={element.mediumId}>{element.mediumId}</option>
                  )}
                  {options}
                </TextField>
                <FigureField
                  label="Thickness"
                  unit="mm"
                  value={element.thicknessMm}
                  fault={faults[`elements.${String(element.key)}`]}
                  onChange={(thicknessMm) => replace({ ...element, thicknessMm })}
                />
              </>
            ) : (
              <>
                <span className="stack-film">Resistive film</span>
                <FigureField
                  label="Per square"
                  unit="Ω"
                  value={element.ohmsPerSquare}
                  fault={faults[`elements.${String(element.key)}`]}
                  onChange={(ohmsPerSquare) => replace({ ...element, ohmsPerSquare })}
                />
              </>
            )}
            <IconButton
              aria-label={`Remove layer ${String(index + 1)}`}
              onClick={() => onChange({ elements: elements.filter(({ key }) => key !== element.key) })}
            >
              <CloseOutlined sx={{ fontSize: 16 }} />
            </IconButton>
          </li>
        ))}
      </ol>
      <TextField
        select
        label="Behind"
        value={draft.backing}
        error={faults.backing !== undefined}
        helperText={faults.backing}
        slotProps={{ select: { native: true } }}
        onChange={(event) => onChange({ backing: event.target.value })}
      >
        <option value={METAL}>Metal</option>
        {options}
      </TextField>
      <div className="stack-buttons">
        <Button
          disabled={!mayAdd(draft)}
          onClick={() => add((key) => ({ key, kind: "layer", mediumId: "air", thicknessMm: "1" }))}
        >
          Add layer
        </Button>
        <Button
          disabled={!mayAdd(draft)}
          onClick={() => add((key) => ({ key, kind: "film", ohmsPerSquare: "377" }))}
        >
          Add film
        </Button>
      </div>
    </div>
  );
}
