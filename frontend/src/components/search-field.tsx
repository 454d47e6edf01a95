import SearchOutlined from "@mui/icons-material/SearchOutlined";
import InputAdornment from "@mui/material/InputAdornment";
import TextField from "@mui/material/TextField";

interface SearchFieldProps {
  /** "Search projects" */
  label: string;
  value: string;
  onChange: (value: string) => void;
}

export function SearchField({ label, value, onChange }: SearchFieldProps) {
  return (
    <TextField
      className="search"
      type="search"
      placeholder={label}
      value={value}
      onChange={(event) => onChange(event.target.value)}
      fullWidth={false}
      sx={{ width: 220 }}
      slotProps={{
        htmlInput: { "aria-label": label },
        input: {
          startAdornment: (
            <InputAdornment position="start">
              <SearchOutlined sx={{ fontSize: 16 }} />
            </InputAdornment>
          ),
        },
      }}
    />
  );
}
