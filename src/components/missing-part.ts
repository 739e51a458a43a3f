/**
 * What stands on the page when even its first part is gone from the server after a deploy. Drawn without React, which
 * may be the part that is missing.
 */
export function showMissingPart(root: HTMLElement): void {
  const words = document.createElement('p');
  words.textContent = 'Part of this version is no longer on the server. Reload to go on with the newer one; nothing recorded is lost.';
  const reload = document.createElement('button');
  reload.type = 'button';
  reload.textContent = 'reload';
  reload.addEventListener('click', () => location.reload());
  reload.className = 'border border-ink px-4 py-2';
  root.className = 'grid gap-4 justify-items-start p-6';
  root.replaceChildren(words, reload);
}
