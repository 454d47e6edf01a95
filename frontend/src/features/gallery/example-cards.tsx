import type { ExampleDto } from "@heddle/backend/contract";
import Skeleton from "@mui/material/Skeleton";
import type { ReactNode } from "react";
import { exampleFacts } from "./example-facts";
import "./example-cards.css";

interface ExampleCardsProps {
  examples: readonly ExampleDto[] | undefined;
  thumb: (document: Record<string, unknown>, widthPx: number, heightPx: number) => ReactNode;
  /** Buttons of one example. */
  actions: (example: ExampleDto) => ReactNode;
}

/** The examples, each with its drawing, what it shows and what can be done with it. */
export function ExampleCards({ examples, thumb, actions }: ExampleCardsProps) {
  if (examples === undefined) {
    return (
      <div className="example-cards" aria-busy="true">
        {[0, 1, 2, 3].map((key) => (
          <Skeleton key={key} variant="rectangular" sx={{ height: 190 }} />
        ))}
      </div>
    );
  }
  return (
    <ul className="example-cards" aria-label="Examples">
      {examples.map((example) => (
        <li key={example.name} className="example-card">
          <div className="example-picture">{thumb(example.document, 184, 136)}</div>
          <div className="example-words">
            <h2>{example.title}</h2>
            <p className="example-facts">{exampleFacts(example.document)}</p>
            <p>{withNames(example.paragraph)}</p>
            <div className="example-actions">{actions(example)}</div>
          </div>
        </li>
      ))}
    </ul>
  );
}

/** A paragraph whose `names` of parameters stand between backticks. */
const withNames = (paragraph: string): ReactNode[] =>
  paragraph.split("`").map((part, index) =>
    index % 2 === 0 ? (
      part
    ) : (
      <code key={index} className="figure">
        {part}
      </code>
    ),
  );
