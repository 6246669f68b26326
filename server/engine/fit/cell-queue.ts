/**
 * Binary heap of cells of places and turns, the largest bound first (J. W. J. Williams, "Algorithm 232: Heapsort", CACM 7, 1964). Of equal bounds the
 * order is that of the heap, the same on every machine. The array is mutated. Cost O(log n) each.
 */
export interface Cell {
  /** Middle and half side of a square of places. */
  x: number; y: number; half: number;
  /** Middle and half width of an interval of turns. */
  angleDeg: number; halfDeg: number;
  bound: number;
  /** More is lost by the turns' width than by the places': halve that. */
  splitTurn: boolean;
}

export function pushCell(heap: Cell[], cell: Cell): void {
  let at = heap.length;
  heap.push(cell);
  while (at > 0) {
    const parent = (at - 1) >> 1;
    if (heap[parent].bound >= cell.bound) break;
    heap[at] = heap[parent];
    at = parent;
  }
  heap[at] = cell;
}

export function popCell(heap: Cell[]): Cell | undefined {
  const first = heap[0];
  const last = heap.pop();
  if (last === undefined || heap.length === 0) return first;
  let at = 0;
  for (let child = 1; child < heap.length; child = 2 * at + 1) {
    if (child + 1 < heap.length && heap[child + 1].bound > heap[child].bound) child++;
    if (heap[child].bound <= last.bound) break;
    heap[at] = heap[child];
    at = child;
  }
  heap[at] = last;
  return first;
}
