import { isPerfect, type Medium } from "@heddle/kernels/scene";
import { figure, quantity } from "../camera/lengths-in-words";

/** A medium's figures in one line: "εr 12  μr 3  σ* poles". */
export function mediumFigures(medium: Medium): string {
  if (isPerfect(medium)) return medium.perfect === "electric" ? "E tangential = 0" : "H tangential = 0";
  const parts: string[] = [];
  const {
    relativePermittivity,
    relativePermeability,
    conductivity,
    magneticLoss,
    electricPoles,
    magneticPoles,
  } = medium;
  if (relativePermittivity !== 1 || relativePermeability === 1)
    parts.push(`εr ${figure(relativePermittivity, 4)}`);
  if (relativePermeability !== 1) parts.push(`μr ${figure(relativePermeability, 4)}`);
  if (conductivity > 0) parts.push(`σ ${quantity(conductivity, "S/m")}`);
  if (magneticLoss > 0) parts.push(`σ* ${quantity(magneticLoss, "Ω/m")}`);
  if (electricPoles.length > 0) parts.push("ε poles");
  if (magneticPoles.length > 0) parts.push("μ poles");
  return parts.join("  ");
}
