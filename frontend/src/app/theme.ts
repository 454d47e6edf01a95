/** MUI dressed in the look's tokens (lib/tokens.css); both schemes read the same CSS variables. */
import { createTheme } from "@mui/material/styles";
import { components } from "./theme-components";

const palette = {
  primary: {
    main: "var(--accent)",
    light: "var(--accent)",
    dark: "var(--accent)",
    contrastText: "var(--on-accent)",
  },
  secondary: { main: "var(--ink)", light: "var(--ink)", dark: "var(--ink)", contrastText: "var(--page)" },
  error: { main: "var(--limit)", light: "var(--limit)", dark: "var(--limit)", contrastText: "var(--page)" },
  text: { primary: "var(--ink)", secondary: "var(--soft)", disabled: "var(--soft)" },
  background: { default: "var(--page)", paper: "var(--sheet)" },
  divider: "var(--rule)",
  action: {
    active: "var(--soft)",
    hover: "var(--shade)",
    selected: "var(--shade)",
    disabled: "var(--soft)",
    disabledBackground: "var(--shade)",
    focus: "var(--shade)",
  },
};

const heading = { fontWeight: 500, lineHeight: 1.25, letterSpacing: 0 };

export const SCHEME_STORAGE_KEY = "heddle.scheme";

export const theme = createTheme({
  cssVariables: { colorSchemeSelector: "data-scheme", nativeColor: true, disableCssColorScheme: true },
  colorSchemes: { light: { palette }, dark: { palette } },
  shape: { borderRadius: 3 },
  spacing: 8,
  typography: {
    fontFamily: "var(--sans)",
    fontSize: 13,
    htmlFontSize: 16,
    fontWeightBold: 600,
    h1: { ...heading, fontSize: 22 },
    h2: { ...heading, fontSize: 16 },
    h3: { ...heading, fontSize: 13 },
    body1: { fontSize: 13, lineHeight: 1.35 },
    body2: { fontSize: 13, lineHeight: 1.35 },
    caption: { fontSize: 12, lineHeight: 1.35 },
    button: { fontSize: 13, fontWeight: 500, textTransform: "none", letterSpacing: 0, lineHeight: 1.35 },
    overline: { fontSize: 11, fontWeight: 500, letterSpacing: "0.06em", lineHeight: 1.35 },
  },
  transitions: {
    duration: {
      shortest: 80,
      shorter: 100,
      short: 120,
      standard: 120,
      complex: 140,
      enteringScreen: 120,
      leavingScreen: 100,
    },
  },
  components,
});
