import type { PourRecord } from '@strikeboard/domain/intake/records';
import { orderYd3, type Section, slabTakeoff } from '@strikeboard/domain/takeoff';

/** The slab that a record describes, its amounts as exact decimals. */
export interface RecordSlab {
  thicknessIn: string;
  areaFt2: string;
  volumeYd3: string;
  sections: PourRecord['dimensions'];
}

export interface PourSize {
  /** Null: neither ordered nor to be worked out. */
  orderedYd3: string | null;
  slab: RecordSlab | null;
  /** What was worked out from the yards ordered. */
  reckoned: 'area' | 'thickness' | null;
}

const IN_FT2_PER_YD3 = 324;
/** A reckoned thickness outside of these is no slab: yards or area mean something else. */
const THINNEST_IN = 1;
const THICKEST_IN = 60;

/**
 * Yards and slab of a pour from what its row says. Yards that are not said are the takeoff with the company's waste,
 * rounded up to its step. Of area and thickness, one that is not said is reckoned from the yards ordered less the
 * waste (yd³ × 324 = ft² × in, arithmetic), for the people needed hang on the area.
 */
export function pourSize(
  record: PourRecord,
  rules: { wastePercent: number; orderStepYd3: number },
): PourSize {
  const { dimensions } = record;
  const saidAreaFt2 = record.areaFt2 === null ? areaOf(dimensions) : Number(record.areaFt2);
  const netYd3 =
    record.orderedYd3 === null ? null : Number(record.orderedYd3) / (1 + rules.wastePercent / 100);
  if (saidAreaFt2 !== null && record.thicknessIn !== null) {
    const thicknessIn = Number(record.thicknessIn);
    const { areaFt2, volumeYd3 } =
      dimensions.length > 0
        ? slabTakeoff({ sections: dimensions.map(rectangle), thicknessIn })
        : { areaFt2: saidAreaFt2, volumeYd3: (saidAreaFt2 * thicknessIn) / IN_FT2_PER_YD3 };
    const ordered = record.orderedYd3 ?? String(orderYd3(volumeYd3, rules.wastePercent, rules.orderStepYd3));
    return {
      orderedYd3: ordered,
      slab: slabOf(record.thicknessIn, areaFt2, volumeYd3, dimensions),
      reckoned: null,
    };
  }
  if (netYd3 !== null && saidAreaFt2 !== null) {
    const thicknessIn = (netYd3 * IN_FT2_PER_YD3) / saidAreaFt2;
    const isSlab = thicknessIn >= THINNEST_IN && thicknessIn <= THICKEST_IN;
    return {
      orderedYd3: record.orderedYd3,
      slab: isSlab ? slabOf(thicknessIn.toFixed(2), saidAreaFt2, netYd3, dimensions) : null,
      reckoned: isSlab ? 'thickness' : null,
    };
  }
  if (netYd3 !== null && record.thicknessIn !== null) {
    const areaFt2 = Math.round((netYd3 * IN_FT2_PER_YD3) / Number(record.thicknessIn));
    return {
      orderedYd3: record.orderedYd3,
      slab: slabOf(record.thicknessIn, areaFt2, netYd3, []),
      reckoned: 'area',
    };
  }
  return { orderedYd3: record.orderedYd3, slab: null, reckoned: null };
}

function rectangle(side: PourRecord['dimensions'][number]): Section {
  return {
    shape: 'rectangle',
    opening: false,
    lengthFt: Number(side.lengthFt),
    widthFt: Number(side.widthFt),
  };
}

function areaOf(dimensions: PourRecord['dimensions']): number | null {
  if (dimensions.length === 0) return null;
  return dimensions.reduce((sum, side) => sum + Number(side.lengthFt) * Number(side.widthFt), 0);
}

function slabOf(
  thicknessIn: string,
  areaFt2: number,
  volumeYd3: number,
  sections: PourRecord['dimensions'],
): RecordSlab {
  return { thicknessIn, areaFt2: areaFt2.toFixed(4), volumeYd3: volumeYd3.toFixed(4), sections };
}
