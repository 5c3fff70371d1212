// RFC 768 'Format': source port, destination port, length, checksum; from memory, consistent with RFC 7348 section 5.
export const UDP_HEADER_BYTES = 8;
