import type { ExampleDto } from "@heddle/backend/contract";
import Skeleton from "@mui/material/Skeleton";
import type { ReactNode } from "react";
import { useId } from "react";
import "./start-from.css";

interface StartFromProps {
  /** Undefined while they are on their way. */
  examples: readonly ExampleDto[] | undefined;
  /** Name of the chosen example; null for an empty sheet. */
  chosen: string | null;
  onChoose: (example: string | null) => void;
  thumb: (document: Record<string, unknown>, widthPx: number, heightPx: number) => ReactNode;
}

/** What something new starts with: an empty sheet or one of the examples, each as a small drawing. */
export function StartFrom({ examples, chosen, onChoose, thumb }: StartFromProps) {
  const group = useId();
  const choice = (value: string | null, title: string, picture: ReactNode) => (
    <label key={value ?? ""} className="start-choice">
      <input type="radio" name={group} checked={chosen === value} onChange={() => onChoose(value)} />
      <span className="start-picture">{picture}</span>
      <span className="start-title">{title}</span>
    </label>
  );
  return (
    <fieldset className="start-from">
      <legend className="label">Starts with</legend>
      <div className="start-choices">
        {choice(null, "An empty sheet", null)}
        {examples?.map((example) => choice(example.name, example.title, thumb(example.document, 132, 80)))}
        {examples === undefined
          ? [0, 1, 2].map((key) => <Skeleton key={key} variant="rectangular" sx={{ height: 132 }} />)
          : null}
      </div>
    </fieldset>
  );
}
