/** The sheet's colours as a canvas wants them, read from the look's CSS variables. */
export interface Palette {
  page: string;
  sheet: string;
  ink: string;
  soft: string;
  hairline: string;
  rule: string;
  accent: string;
  limit: string;
  /** Text fonts, sized by the drawing. */
  sans: string;
}

const DAY: Palette = {
  page: "#f6f3ea",
  sheet: "#fbf9f3",
  ink: "#23282e",
  soft: "#5c636b",
  hairline: "#bdb6a4",
  rule: "#d9d3c3",
  accent: "#0f6b5c",
  limit: "#b3261e",
  sans: '"Fira Sans", system-ui, sans-serif',
};

export function readPalette(element: Element): Palette {
  const style = getComputedStyle(element);
  const read = (name: string, fallback: string): string => {
    const value = style.getPropertyValue(name).trim();
    return value === "" ? fallback : value;
  };
  return {
    page: read("--page", DAY.page),
    sheet: read("--sheet", DAY.sheet),
    ink: read("--ink", DAY.ink),
    soft: read("--soft", DAY.soft),
    hairline: read("--hairline", DAY.hairline),
    rule: read("--rule", DAY.rule),
    accent: read("--accent", DAY.accent),
    limit: read("--limit", DAY.limit),
    sans: read("--sans", DAY.sans),
  };
}

/** Calls back when the system or the person changes between day and night. Gives back its own removal. */
export function watchScheme(onChange: () => void): () => void {
  const media = matchMedia("(prefers-color-scheme: dark)");
  media.addEventListener("change", onChange);
  const observer = new MutationObserver(onChange);
  observer.observe(document.documentElement, {
    attributes: true,
    attributeFilter: ["data-scheme", "class", "style"],
  });
  return () => {
    media.removeEventListener("change", onChange);
    observer.disconnect();
  };
}
