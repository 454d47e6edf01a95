/** What the module offers: to the engine `run` and `quit`, to helper threads `serve`. */
export { quit, run, serve } from "./job";
