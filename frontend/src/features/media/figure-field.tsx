import InputAdornment from "@mui/material/InputAdornment";
import TextField from "@mui/material/TextField";

interface FigureFieldProps {
  label: string;
  unit: string;
  value: string;
  fault?: string | undefined;
  readOnly?: boolean;
  onChange: (value: string) => void;
}

/** A field for one number with its unit. */
export function FigureField({ label, unit, value, fault, readOnly = false, onChange }: FigureFieldProps) {
  return (
    <TextField
      label={label}
      value={value}
      error={fault !== undefined}
      helperText={fault}
      onChange={(event) => onChange(event.target.value)}
      slotProps={{
        htmlInput: {
          inputMode: "decimal",
          autoComplete: "off",
          style: { fontFamily: "var(--mono)", fontSize: 12 },
        },
        input: {
          readOnly,
          endAdornment:
            unit === "" ? undefined : (
              <InputAdornment position="end" disableTypography sx={{ fontSize: 12, color: "var(--soft)" }}>
                {unit}
              </InputAdornment>
            ),
        },
      }}
    />
  );
}
