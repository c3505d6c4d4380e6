/**
 * Keeps the figures beside a form in step with its fields. After a change the form is posted to the address in its
 * `data-figures-from`, which only works things out, and the parts with these ids are taken from the page it answers. Where that
 * fails (no connection, signed out) nothing changes: the form's own button still asks.
 * @param without names of fields that no figure depends on
 */
export function keepFigures(form: HTMLFormElement | null, ids: readonly string[], without: readonly string[]): void {
  const address = form?.dataset['figuresFrom'];
  if (!form || address === undefined) return;
  let asking: AbortController | undefined;
  form.addEventListener('change', ({ target }) => {
    if (target instanceof Element && without.includes(target.getAttribute('name') ?? '')) return;
    asking?.abort();
    asking = new AbortController();
    void ask(form, address, asking.signal).then((page) => {
      if (page) for (const id of ids) take(page, id);
    });
  });
}

async function ask(form: HTMLFormElement, address: string, signal: AbortSignal): Promise<Document | null> {
  const body = new URLSearchParams([...new FormData(form)].map(([name, value]) => [name, String(value)]));
  try {
    const answer = await fetch(address, { method: 'POST', body, signal, headers: { accept: 'text/html' }, redirect: 'error' });
    // 422: something cannot be read yet, and the figures say so.
    return answer.ok || answer.status === 422 ? new DOMParser().parseFromString(await answer.text(), 'text/html') : null;
  } catch {
    return null;
  }
}

function take(page: Document, id: string): void {
  const [here, fresh] = [document.getElementById(id), page.getElementById(id)];
  if (here && fresh && here.innerHTML !== fresh.innerHTML) here.replaceChildren(...fresh.childNodes);
}
