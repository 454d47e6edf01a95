import { useMemo, useState } from "react";
import { Link, NavLink, Outlet, useLocation } from "react-router-dom";
import { Mark } from "../../components/mark";
import type { HeaderSlots } from "../../components/page-header";
import { HeaderSlotsContext } from "../../components/page-header";
import "./app-frame.css";
import { PersonMenu } from "./person-menu";
import { SchemeSwitch } from "./scheme-switch";

/** Header and page: the frame of everything behind the sign-in. */
export function AppFrame() {
  const [crumbs, setCrumbs] = useState<HTMLElement | null>(null);
  const [actions, setActions] = useState<HTMLElement | null>(null);
  const { pathname } = useLocation();
  const isAtProjects = pathname === "/" || /^\/(projects|scenes)\//.test(pathname);
  const slots = useMemo<HeaderSlots>(() => ({ crumbs, actions }), [crumbs, actions]);
  return (
    <div className="frame">
      <a className="frame-skip" href="#page">
        Skip to the page
      </a>
      <header className="frame-header">
        <Link to="/" className="frame-name" aria-label="Heddle, to the projects">
          <Mark />
          <span>heddle</span>
        </Link>
        <nav className="frame-crumbs" aria-label="You are here" ref={setCrumbs} />
        <div className="frame-actions" ref={setActions} />
        <nav className="frame-nav" aria-label="Pages">
          <Link
            to="/"
            className={isAtProjects ? "active" : undefined}
            aria-current={pathname === "/" ? "page" : undefined}
          >
            Projects
          </Link>
          <NavLink to="/examples">Examples</NavLink>
          <NavLink to="/media">Media</NavLink>
        </nav>
        <SchemeSwitch />
        <PersonMenu />
      </header>
      <main className="frame-page" id="page" tabIndex={-1}>
        <HeaderSlotsContext value={slots}>
          <Outlet />
        </HeaderSlotsContext>
      </main>
    </div>
  );
}
