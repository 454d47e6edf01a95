import type { Tool } from "../tool";
import { MeasureIdle } from "./idle";

export const measureTool: Tool = { id: "measure", rest: (machine) => new MeasureIdle(machine, null) };
