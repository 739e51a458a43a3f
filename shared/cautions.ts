/** The cautions every person meets: at sign-up, in the grid check, on the event page and on the printed plan. */
export interface Caution {
  readonly id: string;
  readonly text: string;
}

export const CAUTIONS: readonly Caution[] = [
  {
    id: 'closed-roads-only',
    text: 'Only for closed courses under the control of officials, or within the posted limits.',
  },
  {
    id: 'officials-outrank-the-screen',
    text: 'Officials, flags and the road outrank the screen. The starter outranks its countdown.',
  },
  {
    id: 'rules-come-first',
    text: "The event's rules, local law and licensed scrutineers decide what is allowed. Nothing here does.",
  },
  {
    id: 'driver-touches-nothing',
    text: 'While the car moves, nothing asks the driver for a touch.',
  },
  {
    id: 'carry-paper',
    text: 'A tablet can fail. Carry the printed plan and two stopwatches.',
  },
  {
    id: 'times-are-unofficial',
    text: "Times shown are the crew's own and unofficial. The timekeepers' result stands.",
  },
];
