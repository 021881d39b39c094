// The product's navigation: one line of words with our mark, the reader and the organisation at its right; a menu below 960 px.
import { Menu } from "lucide-react";
import { Form, Link, NavLink, useLocation } from "react-router";

export interface ProductNavUser {
  name: string;
  /** In the trade's word: engineer, purchasing … */
  role: string;
  organisation: string;
}

interface ProductNavProps {
  links: readonly { to: string; label: string }[];
  /** Absent for a visitor who is not signed in. */
  user?: ProductNavUser | undefined;
  home?: string;
  accountTo?: string;
  signInTo?: string;
  signOutAction?: string;
}

export function ProductNav(props: ProductNavProps) {
  const { home = "/", user } = props;
  return (
    <header className="page-frame print-hidden">
      <a
        href="#content"
        className="absolute -top-20 left-4 z-30 bg-leaf px-4 py-2 text-13 font-semibold focus-visible:top-2"
      >
        Skip to content
      </a>
      <div className="flex h-13 items-center gap-7 text-13">
        <Link to={home} className="mr-3 flex items-center gap-2.5 text-15 font-bold text-ink no-underline">
          <BrandMark />
          Tenderband
        </Link>
        <nav aria-label="Product" className="hidden self-stretch min-[960px]:flex">
          <ul className="flex gap-5 whitespace-nowrap desktop:gap-7">
            {props.links.map((link) => (
              <li key={link.to} className="flex">
                <ProductLink {...link} />
              </li>
            ))}
          </ul>
        </nav>
        <div className="ml-auto hidden items-center gap-5 whitespace-nowrap text-quiet min-[960px]:flex">
          {user ? <Reader {...props} user={user} /> : <SignIn to={props.signInTo} />}
        </div>
        <PhoneMenu {...props} />
      </div>
    </header>
  );
}

function ProductLink({ to, label }: { to: string; label: string }) {
  return (
    <NavLink
      to={to}
      end={to === "/"}
      className="flex items-center border-y-2 border-transparent text-quiet no-underline transition-colors hover:text-ink aria-[current=page]:border-b-ink aria-[current=page]:font-semibold aria-[current=page]:text-ink"
    >
      {label}
    </NavLink>
  );
}

function Reader({ user, accountTo = "/account", signOutAction }: ProductNavProps & { user: ProductNavUser }) {
  return (
    <>
      <Link to={accountTo} className="hidden text-quiet no-underline hover:text-ink hover:underline desktop:inline">
        {user.name}, {user.role} · {user.organisation}
      </Link>
      <Link to={accountTo} className="text-quiet no-underline hover:text-ink hover:underline desktop:hidden">
        {user.name}
      </Link>
      <SignOut action={signOutAction} />
    </>
  );
}

function SignOut({ action = "/sign-out" }: { action?: string | undefined }) {
  return (
    <Form method="post" action={action}>
      <button className="flex min-h-6 items-center text-quiet hover:text-ink hover:underline">Sign out</button>
    </Form>
  );
}

function SignIn({ to = "/sign-in" }: { to?: string | undefined }) {
  return <Link to={to}>Sign in</Link>;
}

// A details element needs no script; its key closes it when the page changes.
function PhoneMenu(props: ProductNavProps) {
  const { user, accountTo = "/account" } = props;
  const { pathname } = useLocation();
  return (
    <details key={pathname} className="group ml-auto min-[960px]:hidden">
      <summary
        aria-label="Menu"
        className="-mr-3 grid size-11 list-none place-items-center [&::-webkit-details-marker]:hidden"
      >
        <Menu size={20} strokeWidth={1.75} aria-hidden />
      </summary>
      <div className="absolute inset-x-4 z-30 tablet:inset-x-6 border-2 border-ink bg-leaf text-15">
        <nav aria-label="Product">
          <ul>
            {props.links.map((link) => (
              <li key={link.to} className="border-b border-rule">
                <NavLink
                  to={link.to}
                  end={link.to === "/"}
                  className="block border-l-2 border-transparent px-4 py-2.5 text-ink no-underline aria-[current=page]:border-ink aria-[current=page]:font-semibold"
                >
                  {link.label}
                </NavLink>
              </li>
            ))}
          </ul>
        </nav>
        <div className="flex min-h-13 items-center justify-between gap-4 px-4 py-2 text-13 text-quiet">
          {user ? (
            <>
              <Link to={accountTo} className="py-1 text-quiet">
                {user.name}, {user.role} · {user.organisation}
              </Link>
              <SignOut action={props.signOutAction} />
            </>
          ) : (
            <SignIn to={props.signInTo} />
          )}
        </div>
      </div>
    </details>
  );
}

/** Our mark: the walls of a band-pass mask, two hanging stopbands and the passband's pillar. */
export function BrandMark({ size = 20 }: { size?: number }) {
  return (
    <svg
      aria-hidden
      width={size}
      height={size}
      viewBox="0 0 20 20"
      fill="none"
      stroke="currentColor"
      strokeWidth="1.75"
    >
      <path d="M0 11.5h5.5V1M20 11.5h-5.5V1M8.25 19V7.5h3.5V19" />
    </svg>
  );
}
