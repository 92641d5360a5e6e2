import type { Role } from '../../commission/permissions';

/** Who looks at a page, as far as its frame needs to know. */
export interface Viewer {
  name: string | null;
  role: Role;
}

/** The last link of the site's header: where this viewer's own things are. `null` means nobody is signed in. */
export function corner(viewer: Viewer | null): { label: string; href: string } {
  switch (viewer?.role) {
    case 'customer':
      return { label: 'My commissions', href: '/commissions' };
    case 'owner':
      return { label: 'The studio', href: '/studio' };
    case 'bookkeeper':
      return { label: 'The books', href: '/studio/money' };
    case 'maker':
      return { label: 'The bench', href: '/bench' };
    default:
      return { label: 'Sign in', href: '/sign-in' };
  }
}
