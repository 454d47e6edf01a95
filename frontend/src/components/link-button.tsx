import type { ButtonProps } from "@mui/material/Button";
import Button from "@mui/material/Button";
import { Link } from "react-router-dom";

/** A button that goes to a page of this product. */
export function LinkButton({ to, ...rest }: { to: string } & Omit<ButtonProps, "href">) {
  return <Button component={Link} to={to} {...rest} />;
}
