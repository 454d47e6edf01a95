/**
 * The lattice's own dispersion relation in a lossless medium of wave speed c,
 *
 *   sin²(ωΔt/2)/(cΔt)² = sin²(kxΔx/2)/Δx² + sin²(kyΔy/2)/Δy²
 *
 * (A. Taflove and S. C. Hagness, Computational Electrodynamics, 3rd ed. (2005), ch. 4; from memory.)
 */
export interface DispersionMesh {
  dx: number;
  dy: number;
  dt: number;
}

const squaredSine = (x: number): number => Math.sin(x) ** 2;

/**
 * Angular frequency in rad/s of a lattice wave with wave numbers kx, ky in rad/m.
 * NaN where the mesh is unstable for that wave.
 */
export function latticeFrequency(mesh: DispersionMesh, speed: number, kx: number, ky: number): number {
  const { dx, dy, dt } = mesh;
  const sum = squaredSine((kx * dx) / 2) / (dx * dx) + squaredSine((ky * dy) / 2) / (dy * dy);
  return (2 / dt) * Math.asin(speed * dt * Math.sqrt(sum));
}

/**
 * Wave number in rad/m of a lattice wave of angular frequency ω that travels at `angle` radians from +x.
 * Newton's iteration from ω/c, to 10⁻¹⁵ relative; NaN where the lattice carries no such wave (too few cells).
 */
export function latticeWaveNumber(mesh: DispersionMesh, speed: number, omega: number, angle: number): number {
  const { dx, dy, dt } = mesh;
  const cx = Math.cos(angle) * dx * 0.5;
  const cy = Math.sin(angle) * dy * 0.5;
  const target = squaredSine((omega * dt) / 2) / (speed * dt) ** 2;
  let k = omega / speed;
  for (let iteration = 0; iteration < 60; iteration += 1) {
    const value = squaredSine(cx * k) / (dx * dx) + squaredSine(cy * k) / (dy * dy) - target;
    const slope = (Math.sin(2 * cx * k) * cx) / (dx * dx) + (Math.sin(2 * cy * k) * cy) / (dy * dy);
    const change = value / slope;
    k -= change;
    if (!Number.isFinite(k)) return Number.NaN;
    if (Math.abs(change) <= 1e-15 * Math.abs(k)) return k;
  }
  return Number.NaN;
}

/** Phase velocity over c, minus 1, at one angle. */
export const phaseVelocityError = (
  mesh: DispersionMesh,
  speed: number,
  omega: number,
  angle: number,
): number => omega / (latticeWaveNumber(mesh, speed, omega, angle) * speed) - 1;

/**
 * The largest relative phase-velocity error over all directions. It lies on an axis or on the cell's diagonal; a scan
 * of the quadrant by degrees covers both and what lies between. NaN where some direction carries no wave.
 */
export function worstDispersionError(mesh: DispersionMesh, speed: number, omega: number): number {
  let worst = 0;
  for (let degree = 0; degree <= 90; degree += 1) {
    const error = Math.abs(phaseVelocityError(mesh, speed, omega, (degree * Math.PI) / 180));
    if (Number.isNaN(error)) return Number.NaN;
    worst = Math.max(worst, error);
  }
  return worst;
}
