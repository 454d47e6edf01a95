import type { ReactNode } from "react";
import { createContext, Fragment, useContext } from "react";
import { createPortal } from "react-dom";
import { Link } from "react-router-dom";

/** Places in the app's header that the page fills; set by the frame. */
export interface HeaderSlots {
  crumbs: HTMLElement | null;
  actions: HTMLElement | null;
}
export const HeaderSlotsContext = createContext<HeaderSlots>({ crumbs: null, actions: null });

export interface Crumb {
  label: string;
  /** Left out for the page that is open. */
  to?: string;
}

interface PageHeaderProps {
  /** From the outermost to the open page; a page that stands in the header's list needs only its own. */
  crumbs: readonly Crumb[];
  /** What follows the last crumb after a middle dot: "rev 3, saved 14:02". */
  note?: ReactNode;
  /** Buttons at the header's right. */
  actions?: ReactNode;
}

/** Fills the header of the frame from inside a page, and names the tab. */
export function PageHeader({ crumbs, note, actions }: PageHeaderProps) {
  const slots = useContext(HeaderSlotsContext);
  const last = crumbs.at(-1);
  return (
    <>
      <title>{last === undefined ? "Heddle" : `${last.label} · Heddle`}</title>
      {slots.crumbs === null || crumbs.length < 2
        ? null
        : createPortal(
            <>
              <ol>
                {crumbs.map((crumb, index) => (
                  <Fragment key={`${crumb.to ?? ""} ${crumb.label}`}>
                    {index === 0 ? null : <li aria-hidden="true">/</li>}
                    <li data-open={crumb.to === undefined ? "" : undefined}>
                      {crumb.to === undefined ? (
                        <span aria-current="page">{crumb.label}</span>
                      ) : (
                        <Link to={crumb.to}>{crumb.label}</Link>
                      )}
                    </li>
                  </Fragment>
                ))}
              </ol>
              {note === undefined || note === null ? null : <span className="crumb-note">· {note}</span>}
            </>,
            slots.crumbs,
          )}
      {actions === undefined || slots.actions === null ? null : createPortal(actions, slots.actions)}
    </>
  );
}
