/** Dates as the browser's locale writes them. */
const DAY = new Intl.DateTimeFormat(undefined, { dateStyle: 'medium' });
const MOMENT = new Intl.DateTimeFormat(undefined, { dateStyle: 'medium', timeStyle: 'short' });

export const showDay = (instant: string): string => DAY.format(new Date(instant));
export const showMoment = (instant: string): string => MOMENT.format(new Date(instant));
