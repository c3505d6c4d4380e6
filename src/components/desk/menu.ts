import type { MenuItem } from '~/layouts/menu.ts';
import { paths } from '~/domain/paths.ts';

/** The rooms of the desk, in the order of its menu. A new room is one row here. */
export const deskMenu: readonly MenuItem[] = [
  { label: 'What waits', href: paths.desk },
  { label: 'Reports', href: paths.deskReports },
  { label: 'Listings', href: paths.deskListings },
  { label: 'Bookings', href: paths.deskBookings },
  { label: 'Accounts', href: paths.deskAccounts },
  { label: 'Money', href: paths.deskMoney },
  { label: 'Audit log', href: paths.deskEvents },
];
