/** The few signs in use. Each stands beside a word; none carries a meaning alone. */
const SHAPES = {
  fault: 'M12 2 23 21H1ZM11 9v6h2V9Zm0 8v2h2v-2Z',
  ready: 'M9.5 19.5 2.6 12.6l2.1-2.1 4.8 4.8L19.3 5.5l2.1 2.1Z',
  missing: 'M12 2a10 10 0 1 1 0 20 10 10 0 0 1 0-20Zm0 3a7 7 0 1 0 0 14 7 7 0 0 0 0-14Z',
  stop: 'M7.9 2h8.2L22 7.9v8.2L16.1 22H7.9L2 16.1V7.9Z',
  undo: 'M9 3 3 9l6 6v-4h5a4 4 0 0 1 0 8H8v3h6a7 7 0 0 0 0-14H9Z',
  erase:
    'M8 4h14v16H8l-7-8ZM9 6l-5.3 6L9 18h11V6Zm2 3.9 1.4-1.4 2.1 2.1 2.1-2.1L18 9.9 15.9 12l2.1 2.1-1.4 1.4-2.1-2.1-2.1 2.1-1.4-1.4 2.1-2.1Z',
  sun: 'M12 7a5 5 0 1 1 0 10 5 5 0 0 1 0-10ZM11 1h2v4h-2Zm0 18h2v4h-2ZM1 11h4v2H1Zm18 0h4v2h-4ZM3.5 4.9l1.4-1.4 2.9 2.8-1.5 1.5Zm12.7 12.8 1.5-1.5 2.8 2.9-1.4 1.4ZM3.5 19.1l2.8-2.9 1.5 1.5-2.9 2.8ZM16.2 6.3l2.9-2.8 1.4 1.4-2.8 2.9Z',
  sound: 'M3 9v6h4l6 5V4L7 9Zm13-1.5v9a5 5 0 0 0 0-9Z',
  silent: 'M3 9v6h4l6 5V4L7 9Zm12.1.5 1.4-1.4 2 2 2-2 1.4 1.4-2 2 2 2-1.4 1.4-2-2-2 2-1.4-1.4 2-2Z',
} as const;

export type IconName = keyof typeof SHAPES;

export function Icon({ name, className = 'size-6' }: { readonly name: IconName; readonly className?: string }) {
  return (
    <svg viewBox="0 0 24 24" className={`shrink-0 ${className}`} fill="currentColor" fillRule="evenodd" aria-hidden="true">
      <path d={SHAPES[name]} />
    </svg>
  );
}
