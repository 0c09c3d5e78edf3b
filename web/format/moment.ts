const MOMENT = new Intl.DateTimeFormat('sv-SE', { dateStyle: 'short', timeStyle: 'short' });

/** A stored moment as "2031-05-04 14:02" in the time of this device; a text that is no moment comes back as it is. */
export function shownMoment(iso: string): string {
  const moment = new Date(iso);
  return Number.isNaN(moment.getTime()) ? iso : MOMENT.format(moment);
}
