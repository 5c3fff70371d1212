// IEEE 802.3 clause 3.1.1: destination, source, length/type; value from memory, consistent with RFC 7348 section 5.
export const ETHERNET_HEADER_BYTES = 14;

// IEEE 802.1Q clause 9.6: tag protocol identifier and tag control information; value from memory.
export const VLAN_TAG_BYTES = 4;

// IEEE 802.3 clause 3.2.9: CRC-32; value from memory, consistent with RFC 2544 appendix B.
export const FCS_BYTES = 4;

// RFC 2544 appendix B: preamble of 64 bits, start delimiter included.
export const PREAMBLE_BYTES = 8;

// RFC 2544 appendix B: gap of 96 bits between two frames.
export const INTER_FRAME_GAP_BYTES = 12;

// RFC 894: the data field holds at least 46 octets; shorter packets are padded.
export const MINIMUM_PAYLOAD_BYTES = 46;

// RFC 894: the data field holds at most 1500 octets.
export const STANDARD_PAYLOAD_BYTES = 1500;

// Common practice, no source: the IP MTU that jumbo frames are set to.
export const JUMBO_PAYLOAD_BYTES = 9000;

// RFC 2544 section 9.1: minimum Ethernet frame, FCS included.
export const MINIMUM_FRAME_BYTES = 64;
