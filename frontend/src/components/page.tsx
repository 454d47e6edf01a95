import type { ReactNode } from "react";
import "./page.css";

interface PageProps {
  title: ReactNode;
  /** One line under the title. */
  lead?: ReactNode;
  /** Search, filters and the page's main button, at the title's right. */
  tools?: ReactNode;
  children: ReactNode;
  /** A caution or an explanation at the foot. */
  foot?: ReactNode;
}

/** The plain page: a title with one line, its tools, the matter, a foot. */
export function Page({ title, lead, tools, children, foot }: PageProps) {
  return (
    <div className="page">
      <div className="page-head">
        <div className="page-title">
          <h1>{title}</h1>
          {lead === undefined ? null : <p>{lead}</p>}
        </div>
        {tools === undefined ? null : <div className="page-tools">{tools}</div>}
      </div>
      {children}
      {foot === undefined ? null : <footer className="page-foot">{foot}</footer>}
    </div>
  );
}
