import { figure, sizeMm, THIN_SPACE } from "../../lib/figures";

const isRecord = (value: unknown): value is Record<string, unknown> =>
  typeof value === "object" && value !== null;

/** One line about a scene document: "TMz · 300 × 200 mm · 0.3 to 2 GHz"; what it does not say is left out. */
export function exampleFacts(document: Record<string, unknown>): string {
  const { polarization, section, band } = document;
  const facts: string[] = [];
  if (typeof polarization === "string") facts.push(polarization);
  if (
    isRecord(section) &&
    typeof section["widthMm"] === "number" &&
    typeof section["heightMm"] === "number"
  ) {
    facts.push(sizeMm(section["widthMm"], section["heightMm"]));
  }
  if (isRecord(band) && typeof band["fromGHz"] === "number" && typeof band["toGHz"] === "number") {
    facts.push(`${figure(band["fromGHz"])} to ${figure(band["toGHz"])}${THIN_SPACE}GHz`);
  }
  return facts.join(" · ");
}
