/**
 * Shapes as closed rings of straight lines, in the coordinates of the shape (mm).
 *
 * Polygons and rectangles are exact. Curves are replaced by polygons of the same area whose chords leave the curve by at most
 * `tolerance`, so a cell's coverage is off by at most tolerance × (length of curve in the cell).
 */
export type Point = readonly [number, number];

/** The area shapes of a scene with their lengths in mm; angles in degrees counter-clockwise. */
export type AreaShape =
  | { kind: "rectangle"; x: number; y: number; width: number; height: number; angle: number }
  | { kind: "ellipse"; x: number; y: number; rx: number; ry: number; angle: number }
  | { kind: "polygon"; points: readonly Point[]; holes: readonly (readonly Point[])[] }
  | { kind: "stroke"; points: readonly Point[]; widthMm: number };

export interface Outline {
  rings: readonly (readonly Point[])[];
  /** Inside where the winding number is odd, or where it is not zero (overlapping parts of a stroke). */
  rule: "even-odd" | "non-zero";
}

/** Corners of a circle's polygon: chord error of radius·(1 − cos(π/n)), at least 12, a multiple of 4. */
function circleCorners(radius: number, tolerance: number): number {
  const wanted = Math.PI * Math.sqrt(radius / (2 * Math.max(tolerance, radius * 1e-7)));
  return 4 * Math.max(3, Math.ceil(wanted / 4));
}

/** Radius factor that gives a regular n-gon the area of the circle: √((2π/n)/sin(2π/n)). */
const equalAreaFactor = (n: number): number => Math.sqrt((2 * Math.PI) / n / Math.sin((2 * Math.PI) / n));

function turned(points: readonly Point[], [cx, cy]: Point, degrees: number): Point[] {
  if (degrees % 360 === 0) return [...points];
  const radians = (degrees * Math.PI) / 180;
  const [c, s] = degrees % 90 === 0 ? quarterTurn(degrees) : [Math.cos(radians), Math.sin(radians)];
  return points.map(([x, y]) => [cx + c * (x - cx) - s * (y - cy), cy + s * (x - cx) + c * (y - cy)]);
}

/** Exact cosine and sine of a multiple of 90 degrees. */
function quarterTurn(degrees: number): Point {
  const turns: readonly Point[] = [
    [1, 0],
    [0, 1],
    [-1, 0],
    [0, -1],
  ];
  return turns[(((degrees / 90) % 4) + 4) % 4];
}

/**
 * Radius of the corners between the ends of a half disc's polygon of m parts, its two ends lying on the circle itself, that gives it the
 * half disc's area: (m − 2)r² + 2Rr = πR²/sin(π/m).
 */
function halfDiscRadius(radius: number, m: number): number {
  const target = (Math.PI * radius * radius) / Math.sin(Math.PI / m);
  return (Math.sqrt(radius * radius + (m - 2) * target) - radius) / (m - 2);
}

/** One segment of a stroke with round ends, counter-clockwise. A segment without length is a disc. */
function capsule([x0, y0]: Point, [x1, y1]: Point, radius: number, tolerance: number): Point[] {
  const m = circleCorners(radius, tolerance) / 2;
  const inner = halfDiscRadius(radius, m);
  const start = Math.hypot(x1 - x0, y1 - y0) > 0 ? Math.atan2(y1 - y0, x1 - x0) - Math.PI / 2 : 0;
  const halfDisc = (x: number, y: number, from: number): Point[] =>
    Array.from({ length: m + 1 }, (_, i): Point => {
      const angle = from + (Math.PI * i) / m;
      const r = i === 0 || i === m ? radius : inner;
      return [x + r * Math.cos(angle), y + r * Math.sin(angle)];
    });
  return [...halfDisc(x1, y1, start), ...halfDisc(x0, y0, start + Math.PI)];
}

/** The outline of an area shape. `tolerance` in mm bounds how far a chord may leave its curve. */
export function outlineOf(shape: AreaShape, tolerance: number): Outline {
  switch (shape.kind) {
    case "rectangle": {
      const { x, y, width, height, angle } = shape;
      const corners: Point[] = [
        [x, y],
        [x + width, y],
        [x + width, y + height],
        [x, y + height],
      ];
      return { rings: [turned(corners, [x + width / 2, y + height / 2], angle)], rule: "even-odd" };
    }
    case "ellipse": {
      const { x, y, rx, ry, angle } = shape;
      const n = circleCorners(Math.max(rx, ry), tolerance);
      const factor = equalAreaFactor(n);
      const ring: Point[] = [];
      for (let i = 0; i < n; i += 1) {
        const phase = (2 * Math.PI * (i + 0.5)) / n;
        ring.push([x + factor * rx * Math.cos(phase), y + factor * ry * Math.sin(phase)]);
      }
      return { rings: [turned(ring, [x, y], angle)], rule: "even-odd" };
    }
    case "polygon":
      return { rings: [shape.points, ...shape.holes], rule: "even-odd" };
    case "stroke": {
      const radius = shape.widthMm / 2;
      const { points } = shape;
      if (points.length === 1) {
        return { rings: [capsule(points[0], points[0], radius, tolerance)], rule: "non-zero" };
      }
      const rings = points.slice(1).map((to, index) => capsule(points[index], to, radius, tolerance));
      return { rings, rule: "non-zero" };
    }
  }
}
