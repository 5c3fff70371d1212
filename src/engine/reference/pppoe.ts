// RFC 2516 section 4: version, type, code, session, length.
export const PPPOE_HEADER_BYTES = 6;

// RFC 2516 section 5 and RFC 1661 section 2: PPP protocol field, not compressed.
export const PPP_PROTOCOL_BYTES = 2;
