/** A time as this device's clock says it: `8:19 am`. @param zone the site's clock instead */
export function timeOfDay(at: Date | string, zone?: string): string {
  return new Date(at).toLocaleTimeString('en-US', { hour: 'numeric', minute: '2-digit', timeZone: zone }).replaceAll('\u202F', ' ').toLowerCase();
}

/** `Tue 1 Dec, 8:19 am`, as days are said everywhere. @param zone the site's clock instead */
export function dayAndTime(at: Date | string, zone?: string): string {
  const parts = new Intl.DateTimeFormat('en-US', { weekday: 'short', day: 'numeric', month: 'short', timeZone: zone }).formatToParts(new Date(at));
  const part = (type: Intl.DateTimeFormatPartTypes): string => parts.find((one) => one.type === type)?.value ?? '';
  return `${part('weekday')} ${part('day')} ${part('month')}, ${timeOfDay(at, zone)}`;
}
