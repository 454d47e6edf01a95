import CloseOutlined from "@mui/icons-material/CloseOutlined";
import IconButton from "@mui/material/IconButton";
import TextField from "@mui/material/TextField";
import { FigureField } from "./figure-field";
import type { Faults, PoleDraft } from "./medium-draft";

interface PoleFieldsProps {
  pole: PoleDraft;
  faults: Faults;
  readOnly: boolean;
  onChange: (pole: PoleDraft) => void;
  onRemove: () => void;
}

/** One pole of ε or μ: a Debye relaxation or a Lorentz resonance. */
export function PoleFields({ pole, faults, readOnly, onChange, onRemove }: PoleFieldsProps) {
  const fault = (field: string): string | undefined => faults[`poles.${pole.key}.${field}`];
  const figure = (field: "delta" | "tauNs" | "resonanceGHz" | "dampingGHz", label: string, unit: string) => (
    <FigureField
      label={label}
      unit={unit}
      value={pole[field]}
      fault={fault(field)}
      readOnly={readOnly}
      onChange={(value) => onChange({ ...pole, [field]: value })}
    />
  );
  return (
    <div className="pole-fields">
      <TextField
        select
        label="Pole of"
        value={pole.of}
        disabled={readOnly}
        slotProps={{ select: { native: true } }}
        onChange={(event) =>
          onChange({ ...pole, of: event.target.value === "magnetic" ? "magnetic" : "electric" })
        }
      >
        <option value="electric">ε</option>
        <option value="magnetic">μ</option>
      </TextField>
      <TextField
        select
        label="Kind"
        value={pole.kind}
        disabled={readOnly}
        slotProps={{ select: { native: true } }}
        onChange={(event) =>
          onChange({ ...pole, kind: event.target.value === "lorentz" ? "lorentz" : "debye" })
        }
      >
        <option value="debye">Debye</option>
        <option value="lorentz">Lorentz</option>
      </TextField>
      {figure("delta", "Δ", "")}
      {pole.kind === "debye" ? (
        figure("tauNs", "τ", "ns")
      ) : (
        <>
          {figure("resonanceGHz", "Resonance", "GHz")}
          {figure("dampingGHz", "Damping", "GHz")}
        </>
      )}
      {readOnly ? null : (
        <IconButton aria-label="Remove this pole" onClick={onRemove} sx={{ mt: "1px" }}>
          <CloseOutlined sx={{ fontSize: 16 }} />
        </IconButton>
      )}
    </div>
  );
}
