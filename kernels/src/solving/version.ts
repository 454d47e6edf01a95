/** Version of the solver as results name it: a change that may change numbers raises it. */
export const SOLVER_VERSION = "0.1.0";
