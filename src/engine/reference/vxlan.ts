// RFC 7348 section 5: flags, reserved bits, VNI, reserved bits.
export const VXLAN_HEADER_BYTES = 8;

// RFC 7348 section 5 and section 8: destination port assigned by IANA.
export const VXLAN_UDP_PORT = 4789;

// RFC 7348 section 5: the VNI has 24 bits.
export const LARGEST_VNI = 16_777_215;

// RFC 8971 section 4: may be the management VNI for BFD between endpoints, whose frames reach no tenant.
export const MANAGEMENT_VNI = 1;
