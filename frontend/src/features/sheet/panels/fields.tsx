import type { Length } from "@heddle/kernels/scene";
import { type KeyboardEvent, type ReactNode, useId, useState } from "react";
import { figure } from "../camera/lengths-in-words";
import { type ParameterValues, parseTypedLength, readLength } from "../document/lengths";
import "./fields.css";

/** Fields of the panels: a label, a value as written, a unit. They commit on Enter and on leaving, Escape takes back. */

type Reading<T> = { ok: true; value: T } | { ok: false; sentence: string };

interface TextEntryProps<T> {
  label: string;
  unit?: string;
  shown: string;
  read: (text: string) => Reading<T>;
  onCommit: (value: T) => void;
  disabled?: boolean;
  /** Shown beside the value: what an expression comes to. */
  aside?: string;
  wide?: boolean;
}

export function TextEntry<T>(props: TextEntryProps<T>) {
  const { label, unit, shown, read, onCommit, disabled = false, aside, wide = false } = props;
  const id = useId();
  const [draft, setDraft] = useState<string | null>(null);
  const [sentence, setSentence] = useState<string | null>(null);
  const commit = (): void => {
    if (draft === null || draft === shown) {
      setDraft(null);
      setSentence(null);
      return;
    }
    const reading = read(draft);
    if (!reading.ok) {
      setSentence(reading.sentence);
      return;
    }
    setDraft(null);
    setSentence(null);
    onCommit(reading.value);
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    if (event.key === "Enter") commit();
    if (event.key === "Escape") {
      setDraft(null);
      setSentence(null);
    }
  };
  return (
    <div className="field" data-wide={wide}>
      <span className="field-entry">
        <label htmlFor={id}>{label}</label>
        <input
          id={id}
          type="text"
          inputMode="text"
          autoComplete="off"
          spellCheck={false}
          value={draft ?? shown}
          disabled={disabled}
          aria-invalid={sentence !== null}
          aria-describedby={sentence === null ? undefined : `${id}-said`}
          onChange={(event) => {
            setDraft(event.target.value);
          }}
          onFocus={(event) => {
            event.target.select();
          }}
          onBlur={commit}
          onKeyDown={onKeyDown}
        />
        {unit === undefined ? null : <span className="field-unit">{unit}</span>}
      </span>
      {aside === undefined || sentence !== null ? null : <span className="field-aside">{aside}</span>}
      {sentence === null ? null : (
        <span id={`${id}-said`} className="field-said" role="alert">
          {sentence}
        </span>
      )}
    </div>
  );
}

/** A length in mm: a number, a number with a unit, or an expression that is kept as written. */
export function LengthField(props: {
  label: string;
  value: Length;
  parameters: ParameterValues;
  /** A sentence where the value in mm cannot be taken. */
  check?: (mm: number) => string | null;
  onCommit: (length: Length) => void;
  disabled?: boolean;
}) {
  const { label, value, parameters, check, onCommit, disabled = false } = props;
  const reading = readLength(value, parameters);
  const aside =
    typeof value !== "string" ? undefined : reading.ok ? `= ${figure(reading.value, 4)}` : reading.sentence;
  return (
    <TextEntry<Length>
      label={label}
      unit="mm"
      shown={String(value)}
      {...(aside === undefined ? {} : { aside })}
      disabled={disabled}
      onCommit={onCommit}
      read={(text) => {
        const typed = parseTypedLength(text, parameters);
        if (!typed.ok) return typed;
        const refusal = check?.(typed.value) ?? null;
        return refusal === null ? { ok: true, value: typed.length } : { ok: false, sentence: refusal };
      }}
    />
  );
}

export const aboveZero = (mm: number): string | null => (mm > 0 ? null : "Give a length above 0 mm.");

export function NumberField(props: {
  label: string;
  unit?: string;
  value: number;
  check?: (value: number) => string | null;
  onCommit: (value: number) => void;
  disabled?: boolean;
}) {
  const { check, value, ...rest } = props;
  return (
    <TextEntry<number>
      {...rest}
      shown={String(value)}
      read={(text) => {
        const typed = text.trim().replace("−", "-").replace(",", ".");
        const number = Number(typed);
        if (typed === "" || !Number.isFinite(number)) return { ok: false, sentence: "Give a number." };
        const refusal = check?.(number) ?? null;
        return refusal === null ? { ok: true, value: number } : { ok: false, sentence: refusal };
      }}
    />
  );
}

export function ChoiceField<T extends string>(props: {
  label: string;
  value: T;
  choices: readonly (readonly [T, string])[];
  onCommit: (value: T) => void;
  disabled?: boolean;
  wide?: boolean;
}) {
  const { label, value, choices, onCommit, disabled = false, wide = false } = props;
  const id = useId();
  return (
    <div className="field" data-wide={wide}>
      <span className="field-entry">
        <label htmlFor={id}>{label}</label>
        <select
          id={id}
          value={value}
          disabled={disabled}
          onChange={(event) => {
            const chosen = choices.find(([choice]) => choice === event.target.value);
            if (chosen !== undefined) onCommit(chosen[0]);
          }}
        >
          {choices.map(([choice, words]) => (
            <option key={choice} value={choice}>
              {words}
            </option>
          ))}
        </select>
      </span>
    </div>
  );
}

export const FieldGrid = ({ children }: { children: ReactNode }) => (
  <div className="field-grid">{children}</div>
);
