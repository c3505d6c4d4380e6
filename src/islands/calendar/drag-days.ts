/**
 * Lets a day of the month be dragged to another: a day off or an offered day (`data-move` says which) onto any that takes one
 * (`data-day`). What is dropped is sent by the form beside the grid, which also works without this, from the list's "Move".
 */
export function dragDays(form: HTMLFormElement): void {
  const cellAt = (event: Event, selector: string): HTMLElement | null => (event.target instanceof Element ? event.target.closest<HTMLElement>(selector) : null);
  let from: HTMLElement | null = null;
  let over: HTMLElement | null = null;
  const goOver = (cell: HTMLElement | null): void => {
    over?.removeAttribute('data-over');
    over = cell;
    over?.setAttribute('data-over', '');
  };
  for (const cell of document.querySelectorAll<HTMLElement>('[data-move]')) cell.draggable = true;
  document.addEventListener('dragstart', (event) => {
    from = cellAt(event, '[data-move]');
    if (from && event.dataTransfer) {
      event.dataTransfer.effectAllowed = 'move';
      event.dataTransfer.setData('text/plain', from.dataset['day'] ?? '');
    }
  });
  document.addEventListener('dragover', (event) => {
    const cell = from && cellAt(event, '[data-day]');
    goOver(cell && cell !== from ? cell : null);
    if (over) event.preventDefault();
  });
  document.addEventListener('drop', (event) => {
    const to = over?.dataset['day'];
    if (!from || !to) return;
    event.preventDefault();
    const fields = { what: from.dataset['move'] ?? '', from: from.dataset['day'] ?? '', to };
    for (const [name, value] of Object.entries(fields)) {
      const field = form.elements.namedItem(name);
      if (field instanceof HTMLInputElement) field.value = value;
    }
    form.submit();
  });
  document.addEventListener('dragend', () => {
    goOver(null);
    from = null;
  });
}
