import { paths } from '#lib/paths.ts';

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
    { href: paths.chest(), label: 'Plan chest' },
    { href: paths.guides(), label: 'Guides' },
  ];
  if (actor === null) return [...links, { href: paths.signIn(), label: 'Sign in' }];
  links.push({ href: paths.drawer(), label: 'Drawer' });
  if (actor.hasImprint) links.push({ href: paths.office(), label: 'Drawing office' });
  if (actor.isStaff) links.push({ href: paths.staff(), label: 'Staff' });
  return [...links, { href: paths.account(), label: actor.name }];
}

/** The quieter ways at the foot of every sheet. */
export const footLinks: readonly NavigationLink[] = [
  { href: paths.guide('licences'), label: 'Licences' },
  { href: paths.guide('safety'), label: 'Safety' },
  { href: paths.guide('terms'), label: 'Terms' },
  { href: paths.guide('privacy'), label: 'Privacy' },
];

/** Whether a link is the place the reader is at, or a place above it. */
export function isHere(href: string, pathname: string): boolean {
  return pathname === href || pathname.startsWith(`${href}/`);
}
