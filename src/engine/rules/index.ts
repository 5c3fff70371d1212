import { accessPortWithoutStormLimit } from './access-port-without-storm-limit.ts';
import { activeActiveSharesAssociation } from './active-active-shares-association.ts';
import { aggregateEndsApart } from './aggregate-ends-apart.ts';
import { associationBothBehindNat } from './association-both-behind-nat.ts';
import { associationBothDynamic } from './association-both-dynamic.ts';
import { associationClearWhenDown } from './association-clear-when-down.ts';
import { associationLivenessOneSided } from './association-liveness-one-sided.ts';
import { associationModeMismatch } from './association-mode-mismatch.ts';
import { associationNeitherReachable } from './association-neither-reachable.ts';
import { associationNoCommonPath } from './association-no-common-path.ts';
import { associationNobodyStarts } from './association-nobody-starts.ts';
import { associationProposalsDiffer } from './association-proposals-differ.ts';
import { associationSelectorsMissLoopbacks } from './association-selectors-miss-loopbacks.ts';
import { associationWithoutLiveness } from './association-without-liveness.ts';
import { associationWithoutSecondPath } from './association-without-second-path.ts';
import { associationWithoutTunnel } from './association-without-tunnel.ts';
import { associationWrongInitiator } from './association-wrong-initiator.ts';
import { authenticationMismatch } from './authentication-mismatch.ts';
import { bridgeWhereFilterRequired } from './bridge-where-filter-required.ts';
import { broadcastDeliveredTwice } from './broadcast-delivered-twice.ts';
import { clockOverJitter } from './clock-over-jitter.ts';
import { crossConnectCircuits } from './cross-connect-circuits.ts';
import { crossConnectWithoutPolicy } from './cross-connect-without-policy.ts';
import type { Rule } from './define-rule.ts';
import { demandFlowLimited } from './demand-flow-limited.ts';
import { demandTooLate } from './demand-too-late.ts';
import { dhcpAnsweredTwice } from './dhcp-answered-twice.ts';
import { dhcpServerAtOneSite } from './dhcp-server-at-one-site.ts';
import { duplicateName } from './duplicate-name.ts';
import { endpointAddressDuplicate } from './endpoint-address-duplicate.ts';
import { endpointInsideSegment } from './endpoint-inside-segment.ts';
import { endpointOnOneMember } from './endpoint-on-one-member.ts';
import { firstHopGroupUsedTwice } from './first-hop-group-used-twice.ts';
import { forwardSecrecyMismatch } from './forward-secrecy-mismatch.ts';
import { forwardSecrecyOff } from './forward-secrecy-off.ts';
import { frameExceedsPath } from './frame-exceeds-path.ts';
import { gatewayAddressDuplicate } from './gateway-address-duplicate.ts';
import { gatewayGroupAcrossSites } from './gateway-group-across-sites.ts';
import { gatewayMtusDiffer } from './gateway-mtus-differ.ts';
import { gatewayTakesVxlanFromAnyone } from './gateway-takes-vxlan-from-anyone.ts';
import { hopLimitLowered } from './hop-limit-lowered.ts';
import { hostAddressDuplicate } from './host-address-duplicate.ts';
import { hostSingleHomed } from './host-single-homed.ts';
import { identityFollowsAddress } from './identity-follows-address.ts';
import { ikeFragmentsDropped } from './ike-fragments-dropped.ts';
import { ikeVersionMismatch } from './ike-version-mismatch.ts';
import { ikeVersionOutdated } from './ike-version-outdated.ts';
import { integrityTruncationDiffers } from './integrity-truncation-differs.ts';
import { isolationMissingLeg } from './isolation-missing-leg.ts';
import { landingAddressUnroutable } from './landing-address-unroutable.ts';
import { landingInsideSegment } from './landing-inside-segment.ts';
import { landingOnOneMember } from './landing-on-one-member.ts';
import { limitOverloaded } from './limit-overloaded.ts';
import { livenessShorterThanFailover } from './liveness-shorter-than-failover.ts';
import { macLimitTooLow } from './mac-limit-too-low.ts';
import { macTableTooSmall } from './mac-table-too-small.ts';
import { managementInsideSegment } from './management-inside-segment.ts';
import { multicastDroppedOnPath } from './multicast-dropped-on-path.ts';
import { natKeepaliveTooSlow } from './nat-keepalive-too-slow.ts';
import { neighboursGiveUpEarly } from './neighbours-give-up-early.ts';
import { pairWithoutMemberLink } from './pair-without-member-link.ts';
import { pairWithoutStateSync } from './pair-without-state-sync.ts';
import { policyDropsAddressResolution } from './policy-drops-address-resolution.ts';
import { policyDropsProtocol } from './policy-drops-protocol.ts';
import { policyOneDirection } from './policy-one-direction.ts';
import { policyWithoutLoggedDenial } from './policy-without-logged-denial.ts';
import { portGuardTrips } from './port-guard-trips.ts';
import { portHoldsTwoCables } from './port-holds-two-cables.ts';
import { portMtuBelowSegment } from './port-mtu-below-segment.ts';
import { portRoutedAndBridged } from './port-routed-and-bridged.ts';
import { portVlanClaimedTwice } from './port-vlan-claimed-twice.ts';
import { preSharedKeyReused } from './pre-shared-key-reused.ts';
import { replayProtectionOff } from './replay-protection-off.ts';
import { replayWindowTooSmall } from './replay-window-too-small.ts';
import { reservedGroupNotPassed } from './reserved-group-not-passed.ts';
import { routerAdvertisementsTwice } from './router-advertisements-twice.ts';
import { secondPathTooSmall } from './second-path-too-small.ts';
import { secretInNotes } from './secret-in-notes.ts';
import { segmentCouldBeRouted } from './segment-could-be-routed.ts';
import { segmentHostsParted } from './segment-hosts-parted.ts';
import { segmentIpv6BelowMinimum } from './segment-ipv6-below-minimum.ts';
import { segmentNeedsUnknown } from './segment-needs-unknown.ts';
import { segmentTooLarge } from './segment-too-large.ts';
import { segmentsMerged } from './segments-merged.ts';
import { selectorsLoseFragments } from './selectors-lose-fragments.ts';
import { sequenceNumbersRunOut } from './sequence-numbers-run-out.ts';
import { snoopingWithoutQuerier } from './snooping-without-querier.ts';
import { spanningTreesMerged } from './spanning-trees-merged.ts';
import { stormAnyToAnyMesh } from './storm-any-to-any-mesh.ts';
import { stormCustomerCable } from './storm-customer-cable.ts';
import { stormLimitTooLow } from './storm-limit-too-low.ts';
import { stormLocal } from './storm-local.ts';
import { subnetInTwoSegments } from './subnet-in-two-segments.ts';
import { switchSingleHomed } from './switch-single-homed.ts';
import { transportFiltersNeeded } from './transport-filters-needed.ts';
import { transportHidesTooBig } from './transport-hides-too-big.ts';
import { transportModeThroughNat } from './transport-mode-through-nat.ts';
import { transportMtuUnknown } from './transport-mtu-unknown.ts';
import { tunnelBareOnUntrusted } from './tunnel-bare-on-untrusted.ts';
import { tunnelEndsOffAssociation } from './tunnel-ends-off-association.ts';
import { tunnelFamiliesDiffer } from './tunnel-families-differ.ts';
import { tunnelNoCommonPath } from './tunnel-no-common-path.ts';
import { tunnelTagModeMismatch } from './tunnel-tag-mode-mismatch.ts';
import { tunnelUdpPortMismatch } from './tunnel-udp-port-mismatch.ts';
import { tunnelVniMismatch } from './tunnel-vni-mismatch.ts';
import { tunnelVniReserved } from './tunnel-vni-reserved.ts';
import { tunnelVniUnset } from './tunnel-vni-unset.ts';
import { tunnelWithoutCircuit } from './tunnel-without-circuit.ts';
import { vlanMissingOnPath } from './vlan-missing-on-path.ts';
import { vniUsedTwice } from './vni-used-twice.ts';
import { weakAlgorithm } from './weak-algorithm.ts';
import { zeroChecksumRefused } from './zero-checksum-refused.ts';
import { zonesJoinedUnfiltered } from './zones-joined-unfiltered.ts';

/** Every check, one line each. */
export const rules: readonly Rule[] = [
  accessPortWithoutStormLimit,
  activeActiveSharesAssociation,
  aggregateEndsApart,
  associationBothBehindNat,
  associationBothDynamic,
  associationClearWhenDown,
  associationLivenessOneSided,
  associationModeMismatch,
  associationNeitherReachable,
  associationNoCommonPath,
  associationNobodyStarts,
  associationProposalsDiffer,
  associationSelectorsMissLoopbacks,
  associationWithoutLiveness,
  associationWithoutSecondPath,
  associationWithoutTunnel,
  associationWrongInitiator,
  authenticationMismatch,
  bridgeWhereFilterRequired,
  broadcastDeliveredTwice,
  clockOverJitter,
  crossConnectCircuits,
  crossConnectWithoutPolicy,
  demandFlowLimited,
  demandTooLate,
  dhcpAnsweredTwice,
  dhcpServerAtOneSite,
  duplicateName,
  endpointAddressDuplicate,
  endpointInsideSegment,
  endpointOnOneMember,
  firstHopGroupUsedTwice,
  forwardSecrecyMismatch,
  forwardSecrecyOff,
  frameExceedsPath,
  gatewayAddressDuplicate,
  gatewayGroupAcrossSites,
  gatewayMtusDiffer,
  gatewayTakesVxlanFromAnyone,
  hopLimitLowered,
  hostAddressDuplicate,
  hostSingleHomed,
  identityFollowsAddress,
  ikeFragmentsDropped,
  ikeVersionMismatch,
  ikeVersionOutdated,
  integrityTruncationDiffers,
  isolationMissingLeg,
  landingAddressUnroutable,
  landingInsideSegment,
  landingOnOneMember,
  limitOverloaded,
  livenessShorterThanFailover,
  macLimitTooLow,
  macTableTooSmall,
  managementInsideSegment,
  multicastDroppedOnPath,
  natKeepaliveTooSlow,
  neighboursGiveUpEarly,
  pairWithoutMemberLink,
  pairWithoutStateSync,
  policyDropsAddressResolution,
  policyDropsProtocol,
  policyOneDirection,
  policyWithoutLoggedDenial,
  portGuardTrips,
  portHoldsTwoCables,
  portMtuBelowSegment,
  portRoutedAndBridged,
  portVlanClaimedTwice,
  preSharedKeyReused,
  replayProtectionOff,
  replayWindowTooSmall,
  reservedGroupNotPassed,
  routerAdvertisementsTwice,
  secondPathTooSmall,
  secretInNotes,
  segmentCouldBeRouted,
  segmentHostsParted,
  segmentIpv6BelowMinimum,
  segmentNeedsUnknown,
  segmentTooLarge,
  segmentsMerged,
  selectorsLoseFragments,
  sequenceNumbersRunOut,
  snoopingWithoutQuerier,
  spanningTreesMerged,
  stormAnyToAnyMesh,
  stormCustomerCable,
  stormLimitTooLow,
  stormLocal,
  subnetInTwoSegments,
  switchSingleHomed,
  transportFiltersNeeded,
  transportHidesTooBig,
  transportModeThroughNat,
  transportMtuUnknown,
  tunnelBareOnUntrusted,
  tunnelEndsOffAssociation,
  tunnelFamiliesDiffer,
  tunnelNoCommonPath,
  tunnelTagModeMismatch,
  tunnelUdpPortMismatch,
  tunnelVniMismatch,
  tunnelVniReserved,
  tunnelVniUnset,
  tunnelWithoutCircuit,
  vlanMissingOnPath,
  vniUsedTwice,
  weakAlgorithm,
  zeroChecksumRefused,
  zonesJoinedUnfiltered,
];
