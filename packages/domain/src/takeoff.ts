import { InputProblem, requireInRange, requirePositive } from './problem.ts';

/** Thickness that runs evenly from one side to the other, inches. */
export interface Wedge {
  readonly fromIn: number;
  readonly toIn: number;
}

interface SectionBase {
  /** A hole: its area and volume are taken off. */
  readonly opening: boolean;
}

export interface Rectangle extends SectionBase {
  readonly shape: 'rectangle';
  readonly lengthFt: number;
  readonly widthFt: number;
  /** In place of the slab's thickness. */
  readonly thicknessIn?: number | Wedge;
}

/** Corners in order, either way round; the first need not be repeated at the end. */
export interface Polygon extends SectionBase {
  readonly shape: 'polygon';
  readonly pointsFt: readonly (readonly [xFt: number, yFt: number])[];
  readonly thicknessIn?: number;
}

export interface Circle extends SectionBase {
  readonly shape: 'circle';
  readonly diameterFt: number;
  readonly thicknessIn?: number | Wedge;
}

/**
 * Extra depth along a line: a thickened edge under a slab, or a grade beam. It adds volume and no slab area.
 * Its length is the centre line's, so that corners count once.
 */
export interface Strip extends SectionBase {
  readonly shape: 'strip';
  readonly lengthFt: number;
  readonly widthIn: number;
  /** Below the slab's own thickness. */
  readonly extraDepthIn: number;
}

/** One part of a slab. */
export type Section = Rectangle | Polygon | Circle | Strip;

export interface SlabTakeoff {
  /** Surface to be finished. */
  readonly areaFt2: number;
  readonly volumeYd3: number;
}

const IN_PER_FT = 12;
const IN_FT2_PER_YD3 = 324;
const MAX_FT = 100_000;
const MAX_IN = 1200;
const MAX_POINTS = 500;

/**
 * Plan area of a section, ft2, always positive; an opening's sign is the takeoff's matter. Throws InputProblem
 * for lengths that are not above 0 and for a polygon that crosses or touches itself.
 */
export function sectionAreaFt2(section: Section): number {
  switch (section.shape) {
    case 'rectangle':
      return requireFeet('lengthFt', section.lengthFt) * requireFeet('widthFt', section.widthFt);
    case 'circle':
      return (Math.PI * requireFeet('diameterFt', section.diameterFt) ** 2) / 4;
    case 'strip':
      return (
        requireFeet('lengthFt', section.lengthFt) * (requireInches('widthIn', section.widthIn) / IN_PER_FT)
      );
    case 'polygon':
      return polygonAreaFt2(section.pointsFt);
  }
}

/**
 * Area and volume of a slab: ft2 x in / 324 = yd3. Throws InputProblem for bad sections and when openings leave
 * nothing. Thickness is vertical over the plan; one measured square to a slope needs {@link slopeFactor}.
 */
export function slabTakeoff(input: { sections: readonly Section[]; thicknessIn: number }): SlabTakeoff {
  const slabThicknessIn = requireInches('thicknessIn', input.thicknessIn);
  let areaFt2 = 0;
  let inchFt2 = 0;
  for (const section of input.sections) {
    const sign = section.opening ? -1 : 1;
    const sectionFt2 = sectionAreaFt2(section);
    if (section.shape === 'strip') {
      inchFt2 += sign * sectionFt2 * requireInches('extraDepthIn', section.extraDepthIn);
    } else {
      areaFt2 += sign * sectionFt2;
      inchFt2 += sign * sectionFt2 * meanThicknessIn(section.thicknessIn ?? slabThicknessIn);
    }
  }
  if (areaFt2 < 0 || inchFt2 <= 0) {
    throw new InputProblem('sections', input.sections, 'sections that leave concrete after their openings');
  }
  return { areaFt2, volumeYd3: inchFt2 / IN_FT2_PER_YD3 };
}

/**
 * What to order: the volume with waste, rounded up to the plant's step. Reckoned in whole millionths, because
 * binary decimals turn 12.5 yd3 + 10 percent at quarter yards into 14.0 where 13.75 is right. No volume is no order.
 */
export function orderYd3(volumeYd3: number, wastePercent: number, stepYd3: number): number {
  requireInRange('volumeYd3', volumeYd3, 0, 1e6);
  requireInRange('wastePercent', wastePercent, 0, 100);
  requireInRange('stepYd3', stepYd3, 0.01, 100);
  const millionths = (value: number): bigint => BigInt(Math.round(value * 1e6));
  const hundred = millionths(100);
  const wanted = millionths(volumeYd3) * (hundred + millionths(wastePercent));
  const step = millionths(stepYd3);
  const steps = (wanted + step * hundred - 1n) / (step * hundred);
  return Number(steps * step) / 1e6;
}

/** Area that one cubic yard covers, ft2: 81 at 4 in. */
export function coverageFt2PerYd3(thicknessIn: number): number {
  return IN_FT2_PER_YD3 / requireInches('thicknessIn', thicknessIn);
}

/**
 * Extra concrete of a thickened edge all round a rectangular slab, corners counted once. `haunchIn` is the leg
 * of a 45-degree slope inside the thickening, as deep as it is wide.
 */
export function thickenedPerimeterYd3(input: {
  lengthFt: number;
  widthFt: number;
  edgeWidthIn: number;
  extraDepthIn: number;
  haunchIn?: number;
}): number {
  const lengthFt = requireFeet('lengthFt', input.lengthFt);
  const widthFt = requireFeet('widthFt', input.widthFt);
  const extraFt = requireInches('extraDepthIn', input.extraDepthIn) / IN_PER_FT;
  const edgeFt = requireInches('edgeWidthIn', input.edgeWidthIn) / IN_PER_FT;
  const haunchFt = requireInRange('haunchIn', input.haunchIn ?? 0, 0, input.extraDepthIn) / IN_PER_FT;
  const innerLengthFt = lengthFt - 2 * edgeFt;
  const innerWidthFt = widthFt - 2 * edgeFt;
  if (Math.min(innerLengthFt, innerWidthFt) < 2 * haunchFt) {
    throw new InputProblem(
      'edgeWidthIn',
      input.edgeWidthIn,
      'edges that do not meet in the middle of the slab',
    );
  }
  const ringFt3 = (lengthFt * widthFt - innerLengthFt * innerWidthFt) * extraFt;
  // Each step inward shortens the haunch's perimeter by 8 steps, hence the cubic term at the four corners.
  const haunchFt3 = (innerLengthFt + innerWidthFt) * haunchFt ** 2 - (4 / 3) * haunchFt ** 3;
  return (ringFt3 + haunchFt3) / 27;
}

/** Sloped surface over plan area, for a slope in percent: 12 percent is 1.00717. */
export function slopeFactor(slopePercent: number): number {
  return Math.hypot(1, requireInRange('slopePercent', slopePercent, 0, 1000) / 100);
}

function meanThicknessIn(thickness: number | Wedge): number {
  if (typeof thickness === 'number') return requireInches('thicknessIn', thickness);
  const fromIn = requireInRange('fromIn', thickness.fromIn, 0, MAX_IN);
  const toIn = requireInRange('toIn', thickness.toIn, 0, MAX_IN);
  return requirePositive('thicknessIn', (fromIn + toIn) / 2);
}

function polygonAreaFt2(points: Polygon['pointsFt']): number {
  for (const [xFt, yFt] of points) {
    requireInRange('pointsFt', xFt, -MAX_FT, MAX_FT);
    requireInRange('pointsFt', yFt, -MAX_FT, MAX_FT);
  }
  const edges = edgesOf(points);
  if (edges.length < 3 || edges.length > MAX_POINTS) {
    throw new InputProblem('pointsFt', points, `3 to ${MAX_POINTS} corners`);
  }
  // Neighbours share a corner. One that folds back onto its neighbour meets the edge beyond it, or leaves no area.
  const neighbours = (index: number, other: number): boolean =>
    other === index + 1 || (index === 0 && other === edges.length - 1);
  for (const [index, edge] of edges.entries()) {
    for (const [otherIndex, other] of edges.entries()) {
      if (otherIndex > index && !neighbours(index, otherIndex) && crosses(edge, other)) {
        throw new InputProblem('pointsFt', points, 'an outline that does not cross or touch itself');
      }
    }
  }
  const twice = edges.reduce((sum, { ax, ay, bx, by }) => sum + ax * by - bx * ay, 0);
  if (twice === 0) throw new InputProblem('pointsFt', points, 'an outline that encloses an area');
  return Math.abs(twice) / 2;
}

interface Edge {
  readonly ax: number;
  readonly ay: number;
  readonly bx: number;
  readonly by: number;
}

/** Edges of the outline; repeated corners, such as a closing one, make none. */
function edgesOf(points: Polygon['pointsFt']): Edge[] {
  return points.flatMap(([ax, ay], index) => {
    const [bx, by] = points[(index + 1) % points.length] ?? [ax, ay];
    return ax === bx && ay === by ? [] : [{ ax, ay, bx, by }];
  });
}

/** Which side of the edge the point is on: above 0 left, below 0 right, 0 in line. */
function side({ ax, ay, bx, by }: Edge, x: number, y: number): number {
  return (bx - ax) * (y - ay) - (by - ay) * (x - ax);
}

function crosses(one: Edge, other: Edge): boolean {
  const a = side(one, other.ax, other.ay);
  const b = side(one, other.bx, other.by);
  const c = side(other, one.ax, one.ay);
  const d = side(other, one.bx, one.by);
  const apart = (low1: number, high1: number, low2: number, high2: number): boolean =>
    Math.max(low1, high1) < Math.min(low2, high2) || Math.max(low2, high2) < Math.min(low1, high1);
  if (apart(one.ax, one.bx, other.ax, other.bx) || apart(one.ay, one.by, other.ay, other.by)) return false;
  return a * b <= 0 && c * d <= 0;
}

function requireFeet(field: string, value: number): number {
  return requireInRange(field, requirePositive(field, value), 0, MAX_FT);
}

function requireInches(field: string, value: number): number {
  return requireInRange(field, requirePositive(field, value), 0, MAX_IN);
}
