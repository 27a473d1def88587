/** Today's date where the site is, `YYYY-MM-DD`: the server's clock, the site's zone. */
export const todayAt = (timeZone: string): string =>
  new Intl.DateTimeFormat('sv-SE', { timeZone }).format(new Date());
