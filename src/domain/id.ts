const uuid = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/** Whether a text can be the id of a thing of ours; the database refuses to look for anything else. */
export const isId = (text: string): boolean => uuid.test(text);
