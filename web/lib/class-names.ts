/** Joins the class names that apply. */
export const classNames = (...names: (string | false | null | undefined)[]): string => names.filter(Boolean).join(' ');
