/**
 * Shapes that every kernel speaks of. Lengths mm unless the name says px; degrees clockwise as seen on the page;
 * x right, y down, origin top left of the thing named.
 */

export interface Point { x: number; y: number }
/** Closed; the first point is not repeated. */
export type Ring = Point[];
/** Filled even-odd: outer rings and holes. Origin: top left of the outline's own bounding box unless said otherwise. */
export interface Outline { rings: Ring[] }
export interface Box { x: number; y: number; w: number; h: number }
export type Side = 'left' | 'right' | 'top' | 'bottom';
