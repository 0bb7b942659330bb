/** "USD 1,284.37", with a true minus. */
export const moneyWords = (minor: number, currency: string): string => {
  const whole = Math.trunc(Math.abs(minor) / 100)
    .toString()
    .replace(/\B(?=(\d{3})+$)/g, ',');
  const cents = String(Math.abs(minor) % 100).padStart(2, '0');
  return `${minor < 0 ? '−' : ''}${currency} ${whole}.${cents}`;
};
