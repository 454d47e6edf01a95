import type { Tool } from "../tool";
import { SelectIdle } from "./idle";

export const selectTool: Tool = { id: "select", rest: (machine) => new SelectIdle(machine) };
