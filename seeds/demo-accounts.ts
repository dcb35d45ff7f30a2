/** The accounts of the demo, shown on the sign-in page in demo mode only. One at least for each role. */
export const demoPassword = 'tilings-and-knots';

export const demoAccounts = [
  { role: 'administrator', email: 'office@tarnholt.example.org', password: demoPassword },
  { role: 'finance', email: 'accounts@tarnholt.example.org', password: demoPassword },
  { role: 'organiser', email: 'organiser@tarnholt.example.org', password: demoPassword },
  { role: 'reviewer', email: 'reviewer@example.org', password: demoPassword },
  { role: 'speaker', email: 'speaker@example.org', password: demoPassword },
  { role: 'chair', email: 'chair@example.org', password: demoPassword },
  { role: 'participant', email: 'participant@example.org', password: demoPassword },
  { role: 'funder', email: 'funder@example.org', password: demoPassword },
  { role: 'desk', email: 'desk@tarnholt.example.org', password: demoPassword },
] as const;
