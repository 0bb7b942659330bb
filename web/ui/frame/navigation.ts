import type { LucideIcon } from 'lucide-react';

export interface NavigationItem {
  to: string;
  label: string;
  icon: LucideIcon;
  /** Home is current only at its own address; the others also below it. */
  exact?: boolean;
  /** Also current under these first path segments, for example editions under portfolios. */
  alsoUnder?: readonly string[];
  /** How many things wait there. */
  badge?: number;
}

export const isCurrent = ({ to, exact = false, alsoUnder = [] }: NavigationItem, pathname: string): boolean =>
  exact
    ? pathname === to
    : [to, ...alsoUnder].some((prefix) => pathname === prefix || pathname.startsWith(`${prefix}/`));
