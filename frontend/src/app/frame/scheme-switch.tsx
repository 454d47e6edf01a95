import DarkModeOutlined from "@mui/icons-material/DarkModeOutlined";
import LightModeOutlined from "@mui/icons-material/LightModeOutlined";
import IconButton from "@mui/material/IconButton";
import { useColorScheme } from "@mui/material/styles";
import Tooltip from "@mui/material/Tooltip";

/** Day or night: follows the system until chosen; choosing what the system has follows it again. */
export function SchemeSwitch() {
  const { mode, systemMode, setMode } = useColorScheme();
  const now = mode === "system" ? systemMode : mode;
  const other = now === "dark" ? "light" : "dark";
  const words = other === "dark" ? "Switch to night" : "Switch to day";
  return (
    <Tooltip title={words}>
      <IconButton aria-label={words} onClick={() => setMode(other === systemMode ? "system" : other)}>
        {other === "dark" ? (
          <DarkModeOutlined sx={{ fontSize: 18 }} />
        ) : (
          <LightModeOutlined sx={{ fontSize: 18 }} />
        )}
      </IconButton>
    </Tooltip>
  );
}
