/** The version of the compiled form in `types.ts`; a stored plan of another version is compiled again from its text. */
export const PLAN_FORMAT = 1;
