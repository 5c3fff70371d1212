/**
 * What the address says after `stretch=`: the assistant's form, or the id of the segment that is to reach another site. No
 * id begins with a capital.
 */
export const stretchForm = 'Form';
