/** Into which project of the demo each example goes; the first that takes it has it. */
export interface DemoProject {
  name: string;
  notes: string;
  takes: (exampleName: string) => boolean;
}

export const DEMO_PROJECTS: readonly DemoProject[] = [
  {
    name: "Relay pod enclosure",
    notes: "Where the pod rings, what leaks through its slot, and which lining brings it down.",
    takes: (name) => /pod|box|slot|lin(ed|ing)|vent|choke|flange|seam|enclosure/.test(name),
  },
  {
    name: "Waveguide run",
    notes:
      "Parts of the guides between the mast's head and the pod: what they reflect and let through, and cross-sections for their cut-offs.",
    takes: (name) =>
      /guide|ridge|round|circular|coax|iris|filter|mitre|bend|tee|load|via|channel|section|cavity/.test(name),
  },
  {
    name: "Bench checks",
    notes: "Small scenes with a known answer, to see that the bench tells the truth.",
    takes: () => true,
  },
];
