/** How each MUI part looks here: flat, 3 px corners, a lift only under menus and dialogs, no ripple. */
import type { Components, Theme } from "@mui/material/styles";

const focusRing = { outline: "2px solid var(--accent)", outlineOffset: 2 };

export const components: Components<Theme> = {
  MuiButtonBase: {
    defaultProps: { disableRipple: true },
    styleOverrides: { root: { "&.Mui-focusVisible": focusRing } },
  },
  MuiButton: {
    defaultProps: { disableElevation: true, variant: "outlined", color: "secondary" },
    styleOverrides: {
      root: {
        minWidth: 0,
        minHeight: 32,
        padding: "4px 12px",
        borderRadius: "var(--corner)",
        "&.Mui-disabled": { color: "var(--soft)" },
      },
      outlined: {
        borderColor: "var(--control)",
        "&:hover": { backgroundColor: "var(--shade)", borderColor: "var(--ink)" },
        "&.Mui-disabled": { borderColor: "var(--rule)" },
      },
      contained: {
        "&:hover": { filter: "brightness(1.08)" },
        "&.Mui-disabled": { backgroundColor: "var(--rule)", color: "var(--soft)" },
      },
      text: { "&:hover": { backgroundColor: "var(--shade)" } },
      startIcon: { marginRight: 6, "& > svg": { fontSize: 16 } },
    },
  },
  MuiIconButton: {
    styleOverrides: {
      root: {
        borderRadius: "var(--corner)",
        padding: 6,
        color: "inherit",
        "&:hover": { backgroundColor: "var(--shade)" },
      },
    },
  },
  MuiPaper: {
    defaultProps: { elevation: 0 },
    styleOverrides: { root: { backgroundImage: "none", boxShadow: "none" } },
  },
  MuiMenu: {
    styleOverrides: {
      paper: {
        boxShadow: "var(--lift)",
        border: "1px solid var(--hairline)",
        backgroundColor: "var(--raised)",
      },
      list: { padding: "4px 0" },
    },
  },
  MuiMenuItem: {
    styleOverrides: {
      root: {
        fontSize: 13,
        minHeight: 32,
        "@media (min-width: 0px)": { minHeight: 32 },
        "&.Mui-focusVisible": { ...focusRing, outlineOffset: -2 },
        "&.Mui-disabled": { opacity: 1, color: "var(--soft)" },
      },
    },
  },
  MuiDialog: {
    styleOverrides: {
      paper: {
        boxShadow: "var(--lift)",
        border: "1px solid var(--hairline)",
        backgroundColor: "var(--raised)",
        "@media (max-width: 599px)": { margin: 12, width: "calc(100% - 24px)" },
      },
    },
  },
  MuiDialogTitle: { styleOverrides: { root: { fontSize: 16, fontWeight: 500, padding: "16px 20px 8px" } } },
  MuiDialogContent: { styleOverrides: { root: { padding: "8px 20px" } } },
  MuiDialogActions: { styleOverrides: { root: { padding: "12px 20px 16px", gap: 0 } } },
  MuiBackdrop: {
    styleOverrides: { root: { "&:not(.MuiBackdrop-invisible)": { backgroundColor: "var(--scrim)" } } },
  },
  MuiTooltip: {
    defaultProps: { arrow: false, enterDelay: 300 },
    styleOverrides: {
      tooltip: {
        backgroundColor: "var(--ink)",
        color: "var(--page)",
        fontSize: 12,
        fontWeight: 400,
        borderRadius: "var(--corner)",
        padding: "4px 8px",
        maxWidth: 280,
      },
    },
  },
  MuiTextField: { defaultProps: { size: "small", fullWidth: true } },
  MuiFormControl: { defaultProps: { size: "small" } },
  MuiOutlinedInput: {
    styleOverrides: {
      root: {
        backgroundColor: "var(--raised)",
        fontSize: 13,
        "&:hover:not(.Mui-disabled, .Mui-error) .MuiOutlinedInput-notchedOutline": {
          borderColor: "var(--ink)",
        },
        "&.Mui-focused .MuiOutlinedInput-notchedOutline": { borderWidth: 2 },
      },
      notchedOutline: { borderColor: "var(--control)" },
      input: {
        height: 18,
        "&.MuiInputBase-inputSizeSmall": { paddingTop: 7, paddingBottom: 7 },
        "&::placeholder": { color: "var(--soft)", opacity: 1 },
      },
    },
  },
  MuiInputLabel: {
    styleOverrides: {
      root: {
        fontSize: 13,
        color: "var(--soft)",
        "&.Mui-focused": { color: "var(--accent)" },
        "&.Mui-error": { color: "var(--limit)" },
        '&[data-shrink="false"].MuiInputLabel-sizeSmall': { transform: "translate(14px, 8px) scale(1)" },
      },
    },
  },
  MuiFormHelperText: { styleOverrides: { root: { fontSize: 12, marginLeft: 0, lineHeight: 1.35 } } },
  MuiLink: {
    defaultProps: { underline: "hover", color: "inherit" },
    styleOverrides: { root: { borderRadius: 2, textUnderlineOffset: 3 } },
  },
  MuiTableCell: {
    styleOverrides: {
      root: { fontSize: 13, lineHeight: 1.35, padding: "7px 12px", borderBottom: "1px solid var(--rule)" },
      head: {
        fontSize: 11,
        fontWeight: 500,
        letterSpacing: "0.06em",
        textTransform: "uppercase",
        color: "var(--soft)",
        borderBottom: "1px solid var(--ink)",
        whiteSpace: "nowrap",
      },
    },
  },
  MuiTableSortLabel: {
    styleOverrides: {
      root: { "&:focus-visible": focusRing, "&.Mui-active": { color: "var(--ink)" } },
      icon: { fontSize: 14 },
    },
  },
  MuiSkeleton: {
    defaultProps: { animation: false },
    styleOverrides: { root: { backgroundColor: "var(--rule)" } },
  },
};
