/** Full screen hides the bars that a thumb would meet at the frame; needs a touch, and some devices refuse it. */
export async function goFullScreen(): Promise<void> {
  if (document.fullscreenElement !== null || !document.fullscreenEnabled) return;
  try {
    await document.documentElement.requestFullscreen({ navigationUI: 'hide' });
  } catch {
    // Refused: the cockpit works in a window as well.
  }
}
