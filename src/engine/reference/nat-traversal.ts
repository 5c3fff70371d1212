// RFC 3948 section 2.1: ESP follows a UDP header directly.
export const NAT_TRAVERSAL_HEADER_BYTES = 8;

// RFC 3948 section 2.1 with RFC 7296 section 2.23: the port that IKE uses through NAT.
export const NAT_TRAVERSAL_UDP_PORT = 4500;

// RFC 7296 section 2: the port on which IKE starts.
export const IKE_UDP_PORT = 500;

// RFC 3948 section 4: default interval of keepalives when nothing else is sent.
export const NAT_KEEPALIVE_SECONDS = 20;

// RFC 4787 section 4.3, REQ-5: a NAT keeps a UDP mapping at least this long.
export const NAT_SHORTEST_MAPPING_SECONDS = 120;
