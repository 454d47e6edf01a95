/** Prints what a check measured when MEASURED is set in the environment: the source of the tables in kernels/ACCURACY.md. */
export function measured(what: string, value: number): void {
  if (process.env.MEASURED) process.stdout.write(`measured: ${what}: ${value.toPrecision(3)}\n`);
}
