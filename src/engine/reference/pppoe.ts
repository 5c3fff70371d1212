// RFC 2516 section 4: version, type, code, session, length; section 7 counts 8 octets with the PPP protocol field.
export const PPPOE_HEADER_BYTES = 6;

// RFC 2516 section 7: PPP protocol field, not compressed.
export const PPP_PROTOCOL_BYTES = 2;
