import { onScopeDispose, ref, shallowRef, toValue, watch } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { Fit } from '../../server/engine/fit/types.ts';
import type { FitMaterial } from '../api/dies.ts';
import type { FitRequest, FitRowsAnswer } from './fit-worker.ts';

/** The fits of a table, computed in a worker; rows come as they are done. Other material starts anew. `makeWorker` is the page's, since bundlers want its address in plain sight. */
export function useFitRows(material: MaybeRefOrGetter<FitMaterial | undefined>, makeWorker: () => Worker) {
  const rows = shallowRef<(Fit[] | undefined)[]>([]);
  const done = ref(0);
  const problem = ref<string | null>(null);
  let worker: Worker | null = null;

  function start(of: FitMaterial): void {
    worker?.terminate();
    rows.value = new Array<Fit[] | undefined>(of.sentiments.length).fill(undefined);
    done.value = 0;
    problem.value = null;
    if (of.sentiments.length === 0 || of.dies.length === 0) return;
    worker = makeWorker();
    worker.onmessage = ({ data }: MessageEvent<FitRowsAnswer>) => {
      const next = [...rows.value];
      data.rows.forEach((row, i) => (next[data.from + i] = row));
      rows.value = next;
      done.value = data.from + data.rows.length;
    };
    worker.onerror = () => (problem.value = 'The fits could not be worked out in this browser. Reload the page to try again.');
    // Plain data: what is reactive cannot be handed to a worker.
    const request: FitRequest = JSON.parse(JSON.stringify({ artworks: of.sentiments.map((s) => s.artwork), dies: of.dies.map((d) => d.geometry), options: { goodMm: of.goodMm, snugMm: of.snugMm } })) as FitRequest;
    worker.postMessage(request);
  }
  watch(() => toValue(material), (of) => of && start(of), { immediate: true });
  onScopeDispose(() => worker?.terminate());
  return { rows, done, problem };
}
