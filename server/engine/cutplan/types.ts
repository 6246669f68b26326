export interface CutPart { id: string; widthMm: number; heightMm: number; quantity: number; keepDirection: boolean }
/** axis as in Setup.stripCuts; piece and gives: the sheet is 's', its parts 's1' and 's2', theirs 's1.1' …, left or top first. */
export interface CutStep { sheet: number; piece: string; axis: 'x' | 'y'; atMm: number; gives: [string, string] }
export interface CutPlan { sheets: number; atLeastSheets: number; steps: CutStep[]; left: { sheet: number; widthMm: number; heightMm: number }[]; /** The stock sheet, for drawings. */ stock?: { widthMm: number; heightMm: number } }
