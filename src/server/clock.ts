/** The one place that asks the machine for the time. Rules take an instant as an argument. */
export const now = (): Date => new Date();
