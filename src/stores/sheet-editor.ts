/**
 * The layout under a person's hands: placements of every setup of one run, which are selected and pinned, undo and redo. Faults come from
 * the planner's own check and are worked out anew with each change. Bed coordinates in mm.
 */
import { defineStore } from 'pinia';
import { computed, ref, shallowRef } from 'vue';
import { createLayoutCheck } from '../../server/engine/gangrun/layout.ts';
import type { LayoutFault, Placement, RunOrder, Setup } from '../../server/engine/gangrun/types.ts';
import { createUndoHistory } from './undo-history.ts';
import { movedBy, samePlaces, turnedBy } from './sheet-layout.ts';
import type { Layout } from './sheet-layout.ts';

const EMPTY: Layout = { setups: [] };

export const useSheetEditor = defineStore('sheet-editor', () => {
  const order = shallowRef<RunOrder | null>(null);
  const planned = shallowRef<Layout>(EMPTY);
  const history = createUndoHistory<Layout>(EMPTY);
  const position = ref(0);
  const selected = shallowRef<ReadonlySet<number>>(new Set());
  /** `setup/placement`. */
  const pins = shallowRef<ReadonlySet<string>>(new Set());

  const setup = computed(() => history.now.value.setups[position.value]);
  /** Only the setup in hand: the others do not change under it. */
  const check = computed(() => order.value && createLayoutCheck(order.value));
  const faults = computed<LayoutFault[]>(() => (check.value && setup.value ? check.value([setup.value]) : []));

  function change(next: Pick<Setup, 'turns' | 'placements'>, gesture: string | null = null): void {
    history.change({ setups: history.now.value.setups.map((one, i) => (i === position.value ? next : one)) }, gesture);
  }
  const key = (id: number) => `${position.value}/${id}`;

  return {
    order, setup, position, selected, faults,
    layout: history.now,
    canUndo: history.canUndo, canRedo: history.canRedo,
    changed: computed(() => !samePlaces(planned.value, history.now.value)),
    pinned: computed<ReadonlySet<number>>(() => new Set(setup.value?.placements.map(({ id }) => id).filter((id) => pins.value.has(key(id))))),
    pinCount: computed(() => pins.value.size),
    pinnedPlaces: computed(() => history.now.value.setups.flatMap((one, at) => one.placements.filter(({ id }) => pins.value.has(`${at}/${id}`)).map((placement) => ({ setup: at, placement })))),
    planned: computed(() => planned.value.setups[position.value]),

    open(nextOrder: RunOrder, setups: readonly Setup[]): void {
      order.value = nextOrder;
      planned.value = { setups: setups.map(({ turns, placements }) => ({ turns, placements })) };
      history.reset(planned.value);
      selected.value = new Set();
      // What was pinned before the plan was made stays so.
      pins.value = new Set(nextOrder.pinned?.map(({ setup: at, placement }) => `${at}/${placement.id}`));
    },
    go(at: number): void {
      if (position.value === at) return;
      position.value = at;
      selected.value = new Set();
    },
    select(ids: Iterable<number>): void {
      selected.value = new Set(ids);
    },
    /** By a drag or a key; `gesture` makes one step of undo of a whole drag. */
    moveSelected(dx: number, dy: number, gesture: string | null = null): void {
      change(movedBy(setup.value, selected.value, dx, dy), gesture);
    },
    place(id: number, to: Partial<Pick<Placement, 'x' | 'y' | 'rotationDeg'>>): void {
      change({ ...setup.value, placements: setup.value.placements.map((placement) => (placement.id === id ? { ...placement, ...to } : placement)) });
    },
    put(next: Pick<Setup, 'turns' | 'placements'>, gesture: string | null = null): void {
      change(next, gesture);
    },
    turnSelected(deg: number): void {
      change(turnedBy(setup.value, selected.value, deg));
    },
    pinSelected(on: boolean): void {
      const next = new Set(pins.value);
      for (const id of selected.value) {
        if (on) next.add(key(id));
        else next.delete(key(id));
      }
      pins.value = next;
    },
    endGesture: history.endGesture,
    undo: history.undo,
    redo: history.redo,
    backToPlanned(): void {
      history.change(planned.value);
    },
  };
});
