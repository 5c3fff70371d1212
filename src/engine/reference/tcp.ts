// RFC 9293 section 3.1: header without options; clause from memory.
export const TCP_HEADER_BYTES = 20;

// RFC 7323 section 3.2: the timestamps option has 10 octets, padded to 12.
export const TCP_TIMESTAMPS_OPTION_BYTES = 12;

// RFC 7323 section 1.1: largest window without scaling.
export const TCP_UNSCALED_WINDOW_BYTES = 65_535;

// RFC 7323 section 2.3: 65,535 with the largest shift, 14; from memory.
export const TCP_LARGEST_WINDOW_BYTES = 1_073_725_440;

// RFC 3819 section 8.5.1, citing Mathis, Semke, Mahdavi, Ott, ACM CCR 27(3), July 1997: the constant C of the loss bound.
export const TCP_LOSS_BOUND_CONSTANT = 0.93;
