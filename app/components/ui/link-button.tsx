/**
 * A link that looks like a button: for going somewhere, never for changing something.
 *   <LinkButton to="/units/new" variant="primary" icon={Plus}>New unit</LinkButton>
 *   <LinkButton to={pdfUrl} reloadDocument>Download the PDF</LinkButton>
 */
import { Link, type LinkProps } from "react-router";
import { buttonClass, type ButtonSize, type ButtonVariant } from "./button";
import type { IconType } from "./icon-type";

export interface LinkButtonProps extends LinkProps {
  variant?: ButtonVariant;
  size?: ButtonSize;
  icon?: IconType;
  /** Puts the icon behind the label, for going forwards. */
  iconAtEnd?: boolean;
}

export function LinkButton({
  variant = "secondary",
  size = "md",
  icon: Icon,
  iconAtEnd = false,
  className = "",
  children,
  ...rest
}: LinkButtonProps) {
  const icon = Icon ? <Icon aria-hidden size={size === "bench" ? 22 : 18} className="shrink-0" /> : null;
  return (
    <Link {...rest} className={`${buttonClass(variant, size)} ${className}`}>
      {iconAtEnd ? null : icon}
      {children}
      {iconAtEnd ? icon : null}
    </Link>
  );
}
