/** The same run drives the same drive in practice: its id's last digits are the seed. */
export const seedOf = (runId: string): number => Number.parseInt(runId.replaceAll('-', '').slice(-8), 16);
