import { computed } from 'vue';
import { allGear, cardstockCalls, inkCalls, platformCalls, printerCalls } from '../api/gear.ts';
import { useStudioQuery } from './useStudioQuery.ts';

/** Inks and cardstocks, for choosing from. */
export function useInksAndStocks() {
  const inks = useStudioQuery({ noun: 'inks', key: ['choices'], read: (studioId) => allGear(inkCalls, studioId) });
  const stocks = useStudioQuery({ noun: 'cardstocks', key: ['choices'], read: (studioId) => allGear(cardstockCalls, studioId) });
  return { inks: computed(() => inks.data.value ?? []), stocks: computed(() => stocks.data.value ?? []) };
}

export function usePlatformsAndPrinters() {
  const platforms = useStudioQuery({ noun: 'platforms', key: ['choices'], read: (studioId) => allGear(platformCalls, studioId) });
  const printers = useStudioQuery({ noun: 'printers', key: ['choices'], read: (studioId) => allGear(printerCalls, studioId) });
  return { platforms: computed(() => platforms.data.value ?? []), printers: computed(() => printers.data.value ?? []), known: computed(() => platforms.data.value !== undefined) };
}
