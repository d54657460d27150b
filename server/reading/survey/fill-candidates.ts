/** Values that stand for "no value": declared ones, and constants that programs use undeclared. */
import type { ArrayInfo, AttributeValue, ElementType } from '#contract/reading.ts';

export interface FillCandidate {
  /** as the field's type stores it */
  value: number;
  declared: boolean;
}

/**
 * netcdf.h (NC_FILL_FLOAT 9.969209968386869e36, NC_FILL_INT, NC_FILL_SHORT); 1e20 of the CMIP data request; the others are
 * common practice, no source.
 */
const wellKnown = [1e20, -1e20, 9.969209968386869e36, 1e30, -1e30, 1e35, -1e35, -9999, -999, -99999, -2147483647, -32767];
const declaringAttributes = ['_FillValue', 'missing_value', 'FillValue', 'fill_value'];

const wholeRanges: Partial<Record<ElementType, [number, number]>> = {
  int8: [-128, 127], uint8: [0, 255], int16: [-32768, 32767], uint16: [0, 65535], int32: [-2147483648, 2147483647],
  uint32: [0, 4294967295], int64: [-(2 ** 63), 2 ** 63 - 1024], uint64: [0, 2 ** 64 - 2048],
};

/** The value as `dtype` stores it; null where the type cannot hold it. */
function stored(value: number, dtype: ElementType): number | null {
  if (dtype === 'float64') return value;
  if (dtype === 'float32') return Number.isFinite(Math.fround(value)) ? Math.fround(value) : null;
  // Half precision: 11 significant bits, largest 65504 (IEEE 754-2019, 3.4).
  if (dtype === 'float16') return Math.abs(value) <= 65504 && Number.isInteger(value) && Math.abs(value) <= 2048 ? value : null;
  const range = wholeRanges[dtype];
  return range && Number.isInteger(value) && value >= range[0] && value <= range[1] ? value : null;
}

function numbersOf(attribute: AttributeValue | undefined): number[] {
  if (typeof attribute === 'number') return [attribute];
  return Array.isArray(attribute) ? attribute.filter((value) => typeof value === 'number') : [];
}

/** Zero is left out even when it is declared: it is HDF5's default and a value like any other. */
export function fillCandidates({ dtype, fillValue, attributes }: Pick<ArrayInfo, 'dtype' | 'fillValue' | 'attributes'>): FillCandidate[] {
  const declared = [fillValue ?? 0, ...declaringAttributes.flatMap((name) => numbersOf(attributes[name]))];
  const candidates = new Map<number, FillCandidate>();
  const put = (value: number, isDeclared: boolean) => {
    const exact = stored(value, dtype);
    if (exact !== null && exact !== 0 && !candidates.has(exact)) candidates.set(exact, { value: exact, declared: isDeclared });
  };
  for (const value of declared) put(value, true);
  for (const value of wellKnown) put(value, false);
  return [...candidates.values()];
}
