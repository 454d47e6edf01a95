export { useExamples } from "./api";
export { ExampleCards } from "./example-cards";
