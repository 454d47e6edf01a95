import { describe, expect, it } from "vitest";
import { matching, sorted } from "./table-rows";

interface Row {
  name: string;
  sections: number | null;
}
const columns = [
  { key: "name", value: (row: Row) => row.name },
  { key: "sections", value: (row: Row) => row.sections },
];
const rows: Row[] = [
  { name: "Pod 10", sections: 2 },
  { name: "pod 9", sections: null },
  { name: "Ätna", sections: 11 },
  { name: "Vent", sections: 2 },
];
const names = (of: Row[]): string[] => of.map((row) => row.name);

describe("sorted", () => {
  it("orders names as people do: case aside, numbers by value", () => {
    expect(names(sorted(rows, columns, { key: "name", descending: false }))).toEqual([
      "Ätna",
      "pod 9",
      "Pod 10",
      "Vent",
    ]);
  });
  it("keeps equals in their order and what is missing last, both ways", () => {
    expect(names(sorted(rows, columns, { key: "sections", descending: false }))).toEqual([
      "Pod 10",
      "Vent",
      "Ätna",
      "pod 9",
    ]);
    expect(names(sorted(rows, columns, { key: "sections", descending: true }))).toEqual([
      "Ätna",
      "Pod 10",
      "Vent",
      "pod 9",
    ]);
  });
  it("leaves rows alone for an unknown column", () => {
    expect(sorted(rows, columns, { key: "none", descending: false })).toEqual(rows);
  });
});

describe("matching", () => {
  it("wants every word, in any column and case", () => {
    expect(names(matching(rows, columns, " POD 2 "))).toEqual(["Pod 10"]);
    expect(matching(rows, columns, "  ")).toHaveLength(4);
    expect(matching(rows, columns, "pod nothing")).toEqual([]);
  });
});
