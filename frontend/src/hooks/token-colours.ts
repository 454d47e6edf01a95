import { useSyncExternalStore } from "react";

const NAMES = ["page", "sheet", "ink", "soft", "hairline", "rule", "accent", "limit"] as const;
/** The look's tokens as computed colours, for canvases, which cannot read CSS variables. */
export type TokenColours = Readonly<Record<(typeof NAMES)[number], string>>;

const FALLBACK: TokenColours = {
  page: "#f6f3ea",
  sheet: "#fbf9f3",
  ink: "#23282e",
  soft: "#5c636b",
  hairline: "#bdb6a4",
  rule: "#d9d3c3",
  accent: "#0f6b5c",
  limit: "#b3261e",
};

let snapshot: TokenColours | null = null;

function read(): TokenColours {
  const style = getComputedStyle(document.documentElement);
  const entries = NAMES.map(
    (name) => [name, style.getPropertyValue(`--${name}`).trim() || FALLBACK[name]] as const,
  );
  return Object.fromEntries(entries) as TokenColours;
}

/** The same object until a colour changes, as React asks of a store. */
function current(): TokenColours {
  const now = read();
  if (snapshot === null || NAMES.some((name) => snapshot?.[name] !== now[name])) snapshot = now;
  return snapshot;
}

function subscribe(listener: () => void): () => void {
  const media = matchMedia("(prefers-color-scheme: dark)");
  const observer = new MutationObserver(listener);
  observer.observe(document.documentElement, {
    attributes: true,
    attributeFilter: ["data-scheme", "class", "style"],
  });
  media.addEventListener("change", listener);
  return () => {
    observer.disconnect();
    media.removeEventListener("change", listener);
  };
}

/** Follows day and night, whether by the system or by choice. */
export const useTokenColours = (): TokenColours => useSyncExternalStore(subscribe, current, () => FALLBACK);
