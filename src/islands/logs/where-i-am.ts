/** Places are asked for to so many decimals: a list by distance needs to know where within a mile, and no address should say more. */
const DECIMALS = 2;

/**
 * Shows a line with a button that asks the device for its position, once it is pressed and never before, and lists from there: the form's
 * other answers stay. Without a script or a position there is the ZIP code.
 */
export function useWhereIAm(line: HTMLElement): void {
  const button = line.querySelector('button');
  const status = line.querySelector('[role=status]');
  const form = line.closest('form');
  if (!button || !status || !form || !('geolocation' in navigator)) return;
  line.hidden = false;
  const go = ({ coords }: GeolocationPosition): void => {
    const asked = new URLSearchParams();
    for (const [name, value] of new FormData(form)) if (typeof value === 'string' && value !== '' && !['zip', 'lat', 'lng'].includes(name)) asked.append(name, value);
    asked.set('lat', coords.latitude.toFixed(DECIMALS));
    asked.set('lng', coords.longitude.toFixed(DECIMALS));
    window.location.assign(`${form.getAttribute('action') ?? ''}?${asked}`);
  };
  button.addEventListener('click', () => {
    status.textContent = 'Looking for your position.';
    navigator.geolocation.getCurrentPosition(go, () => (status.textContent = 'Your device did not tell its position. Type a ZIP code instead.'), { timeout: 20_000, maximumAge: 600_000 });
  });
}
