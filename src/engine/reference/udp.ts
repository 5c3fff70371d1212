// RFC 768 'Format': source port, destination port, length, checksum.
export const UDP_HEADER_BYTES = 8;
