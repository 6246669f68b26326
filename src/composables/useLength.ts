import { computed } from 'vue';
import { editableLength, formatLength, formatSize, parseLength } from '../../server/engine/geometry/units.ts';
import type { FormatOptions, ParsedLength, ParseOptions } from '../../server/engine/geometry/units.ts';
import { useSession } from '../stores/session.ts';

/** Lengths in the person's unit; everything else in the program is mm. */
export function useLength() {
  const session = useSession();
  const unit = computed(() => session.unit);
  return {
    unit,
    /** `108 mm`, `4 1/4 in`. */
    show: (mm: number, options?: FormatOptions): string => formatLength(mm, unit.value, options),
    /** `108 × 64 mm`. */
    showSize: (widthMm: number, heightMm: number, options?: FormatOptions): string => formatSize(widthMm, heightMm, unit.value, options),
    /** As put into a LengthField, which keeps the stored length until something is typed: fractions where it is one, else three decimals. */
    field: (mm: number): string => {
      const exact = editableLength(mm, unit.value);
      return unit.value === 'in' && exact.includes('.') ? formatLength(mm, 'in', { inches: 'decimal', decimals: 3 }) : exact;
    },
    parse: (text: string, options?: ParseOptions): ParsedLength => parseLength(text, unit.value, options),
  };
}
