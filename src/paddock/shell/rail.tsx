import { NavLink } from 'react-router';

const PAGES = [
  { to: '/event', name: 'Event', shape: 'M4 4h16v16H4Zm2 4v10h12V8Z' },
  { to: '/plan', name: 'Plan', shape: 'M2 11h20v2H2Zm3-6h4v4H5Zm10 10h4v4h-4Z' },
  {
    to: '/garage',
    name: 'Garage',
    shape: 'M12 2a10 10 0 1 1 0 20 10 10 0 0 1 0-20Zm0 3a7 7 0 1 0 0 14 7 7 0 0 0 0-14Zm0 4a3 3 0 1 1 0 6 3 3 0 0 1 0-6Z',
  },
  { to: '/runs', name: 'Runs', shape: 'M2 17 8 9l5 4 7-9 2 1.600-8.600 11L8.300 12.600 3.600 18.800Z' },
  {
    to: '/team',
    name: 'Team',
    shape:
      'M8 5a3.500 3.500 0 1 1 0 7 3.500 3.500 0 0 1 0-7Zm8 1a3 3 0 1 1 0 6 3 3 0 0 1 0-6ZM2 19c0-4 2.700-6 6-6s6 2 6 6Zm13.500 0c0-2-.500-3.600-1.500-5 3.500-1 8 .500 8 5Z',
  },
] as const;

/** Five places, a rail at the left, a bar at the bottom of a phone. The chosen one carries a piece of the even line. */
export function Rail() {
  return (
    <nav aria-label="pages" className="border-hair bg-ground fixed inset-x-0 bottom-0 z-10 border-t md:static md:border-t-0 print:hidden">
      <ul className="flex justify-around md:grid md:justify-stretch md:gap-1">
        {PAGES.map(({ to, name, shape }) => (
          <li key={to} className="grow md:grow-0">
            <NavLink
              to={to}
              className="text-quiet aria-[current=page]:text-ink aria-[current=page]:border-ink flex min-h-14 flex-col items-center justify-center gap-1 border-t-2 border-transparent text-sm aria-[current=page]:font-bold md:min-h-11 md:flex-row md:justify-start md:gap-3 md:border-t-0 md:border-l-4 md:px-4 md:text-base"
            >
              <svg viewBox="0 0 24 24" className="size-5" fill="currentColor" fillRule="evenodd" aria-hidden="true">
                <path d={shape} />
              </svg>
              {name}
            </NavLink>
          </li>
        ))}
      </ul>
    </nav>
  );
}
