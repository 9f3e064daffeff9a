/** Who is looking at the sheet, as far as its head needs to know; `null` is a visitor who has not signed in. */
export interface SheetActor {
  name: string;
  isStaff: boolean;
  hasImprint: boolean;
}

export interface NavigationLink {
  href: string;
  label: string;
}

/** The ways from the head of every sheet, in reading order, for this reader. */
export function listNavigation(actor: SheetActor | null): NavigationLink[] {
  const links: NavigationLink[] = [
    { href: '/plans', label: 'Plan chest' },
    { href: '/guides', label: 'Guides' },
  ];
  if (actor === null) return [...links, { href: '/sign-in', label: 'Sign in' }];
  links.push({ href: '/drawer', label: 'Drawer' });
  if (actor.hasImprint) links.push({ href: '/drawing-office', label: 'Drawing office' });
  if (actor.isStaff) links.push({ href: '/staff', label: 'Staff' });
  return [...links, { href: '/account', label: actor.name }];
}

/** The quieter ways at the foot of every sheet. */
export const footLinks: readonly NavigationLink[] = [
  { href: '/guides/licences', label: 'Licences' },
  { href: '/guides/safety', label: 'Safety' },
  { href: '/guides/terms', label: 'Terms' },
  { href: '/guides/privacy', label: 'Privacy' },
  { href: '/guides/help', label: 'Help' },
];

/** Whether a link is the place the reader is at, or a place above it. */
export function isHere(href: string, pathname: string): boolean {
  return pathname === href || pathname.startsWith(`${href}/`);
}
