/** Up to two initials of a name: "Marta Olsen" gives "MO". */
export function initialsOf(name: string): string {
  const words = name.trim().split(/\s+/).filter(Boolean);
  const letters = words.length > 1 ? [words[0], words.at(-1)] : words;
  return letters
    .map(
      (word) =>
        Array.from(word ?? "")
          .at(0)
          ?.toLocaleUpperCase() ?? "",
    )
    .join("");
}

/** "1 scene", "0 scenes". */
export const counted = (count: number, one: string, many = `${one}s`): string =>
  `${count} ${count === 1 ? one : many}`;

/** "owner", "owner or engineer", "owner, engineer or manager". */
export const eitherOf = (words: readonly string[]): string =>
  words.length < 2 ? (words[0] ?? "") : `${words.slice(0, -1).join(", ")} or ${words.at(-1) ?? ""}`;
