/** The demo's library. Figures at one frequency are turned to σ = ωε₀ε″ and σ* = ωμ₀μ″ there, as the names say. */
import type { z } from "zod";
import type { mediumSchema } from "@heddle/kernels/scene";

export interface DemoMedium {
  medium: z.input<typeof mediumSchema>;
  source: string;
}

const INVENTED = "invented for the demo";
const HANDBOOK = "typical handbook figure, from memory; replace it by the data sheet of yours";

export const DEMO_MEDIA: readonly DemoMedium[] = [
  {
    medium: { id: "copper", name: "Copper, as a perfect conductor", perfect: "electric" },
    source: "an idealization: set the scene's wall conductivity to 5.8e7 S/m for its losses",
  },
  { medium: { id: "ptfe", name: "PTFE", relativePermittivity: 2.1 }, source: HANDBOOK },
  {
    medium: { id: "fr4", name: "FR4 board at 1 GHz", relativePermittivity: 4.4, conductivity: 0.0049 },
    source: HANDBOOK,
  },
  { medium: { id: "alumina", name: "Alumina 96 %", relativePermittivity: 9.4 }, source: HANDBOOK },
  {
    medium: {
      id: "magnetic-sheet",
      name: "Magnetic sheet at 0.9 GHz",
      relativePermittivity: 12,
      relativePermeability: 3,
      conductivity: 0.02503,
      magneticLoss: 14212,
    },
    source: `${INVENTED}: ε = 12 − 0.5j, μ = 3 − 2j`,
  },
  {
    medium: {
      id: "lossy-foam",
      name: "Lossy foam at 0.9 GHz",
      relativePermittivity: 1.8,
      conductivity: 0.05007,
    },
    source: `${INVENTED}: ε = 1.8 − 1j`,
  },
  {
    medium: {
      id: "load-casting",
      name: "Load casting at 10.3 GHz",
      relativePermittivity: 9,
      relativePermeability: 1.6,
      conductivity: 0.2865,
      magneticLoss: 73190,
    },
    source: `${INVENTED}: ε = 9 − 0.5j, μ = 1.6 − 0.9j`,
  },
  {
    medium: {
      id: "matched-absorber",
      name: "Matched absorber, an ideal",
      conductivity: 0.05,
      magneticLoss: 7096.29,
    },
    source: `${INVENTED}: σ/ε = σ*/μ, so its face reflects nothing; no material does that over a band`,
  },
];
