"""Sends and captures Ethernet frames in network namespaces, as one process that outlives no test.

Reads one JSON command a line from standard input and answers each with one line of JSON; ends when its input ends.

open      sockets {name: {netns, interface}}, cut [{netns, interfaces}]: raw sockets on interfaces, and what to take down in a storm
exchange  frames [{from, hex}], atLeast {name: count}, patienceMs, quietMs, atMostMs, atMostFrames: sends, then listens until each
          socket had as many frames as it is to have, or patience is over, and nothing came for quietMs; when frames keep coming
          beyond a limit, takes the interfaces to cut down at once, so that no storm outlives its measurement
"""

import ctypes
import fcntl
import json
import os
import selectors
import signal
import socket
import struct
import sys
import time

# Numbers of linux/if_packet.h, linux/sched.h and linux/sockios.h.
SOL_PACKET = 263
PACKET_AUXDATA = 8
PACKET_IGNORE_OUTGOING = 23
TP_STATUS_VLAN_VALID = 1 << 4
TP_STATUS_VLAN_TPID_VALID = 1 << 6
CLONE_NEWNET = 0x40000000
SIOCGIFFLAGS = 0x8913
SIOCSIFFLAGS = 0x8914
IFF_UP = 1
SO_RCVBUFFORCE = 33
ETH_P_ALL = 3

# RFC 2464 section 7: neighbour discovery, which goes on by itself and is nothing that anybody waits for.
IPV6_MULTICAST = b'\x33\x33'

libc = ctypes.CDLL(None, use_errno=True)


def enter(netns):
    with open(f'/run/netns/{netns}') as namespace:
        if libc.setns(namespace.fileno(), CLONE_NEWNET) != 0:
            raise OSError(ctypes.get_errno(), f'cannot enter network namespace {netns}')


def open_socket(netns, interface):
    enter(netns)
    opened = socket.socket(socket.AF_PACKET, socket.SOCK_RAW, socket.htons(ETH_P_ALL))
    opened.bind((interface, ETH_P_ALL))
    opened.setsockopt(socket.SOL_SOCKET, SO_RCVBUFFORCE, 8 << 20)
    opened.setsockopt(SOL_PACKET, PACKET_AUXDATA, 1)
    opened.setsockopt(SOL_PACKET, PACKET_IGNORE_OUTGOING, 1)
    opened.setblocking(False)
    return opened


def receive(opened):
    """The next frame as it was on the wire, or None: the kernel hands an outer VLAN tag over beside the frame."""
    try:
        frame, ancillary, _flags, _address = opened.recvmsg(70000, 256)
    except BlockingIOError:
        return None
    except OSError:
        return None  # An interface that was taken down says so once.
    for level, kind, data in ancillary:
        if level == SOL_PACKET and kind == PACKET_AUXDATA:
            status, _length, _kept, _mac, _net, tci, tpid = struct.unpack('=IIIHHHH', data[:20])
            if status & TP_STATUS_VLAN_VALID:
                kind_of_tag = tpid if status & TP_STATUS_VLAN_TPID_VALID else 0x8100
                return frame[:12] + struct.pack('!HH', kind_of_tag, tci) + frame[12:]
    return frame


class Probe:
    def __init__(self):
        self.sockets = {}
        self.to_cut = []

    def open(self, command):
        for name, place in command['sockets'].items():
            self.sockets[name] = open_socket(place['netns'], place['interface'])
        for place in command['cut']:
            enter(place['netns'])
            control = socket.socket(socket.AF_INET, socket.SOCK_DGRAM)
            self.to_cut += [(control, interface) for interface in place['interfaces']]
        return {}

    def cut(self):
        for control, interface in self.to_cut:
            request = struct.pack('16sH14x', interface.encode(), 0)
            try:
                flags = struct.unpack('16sH14x', fcntl.ioctl(control, SIOCGIFFLAGS, request))[1]
                fcntl.ioctl(control, SIOCSIFFLAGS, struct.pack('16sH14x', interface.encode(), flags & ~IFF_UP))
            except OSError:
                pass  # Gone together with its peer or its namespace.

    def exchange(self, command):
        listening = selectors.DefaultSelector()
        for name, opened in self.sockets.items():
            while receive(opened) is not None:
                pass
            listening.register(opened, selectors.EVENT_READ, name)
        for frame in command['frames']:
            self.sockets[frame['from']].send(bytes.fromhex(frame['hex']))
        started = last = time.monotonic()
        total = 0
        is_cut = False
        captured = {name: {} for name in self.sockets}
        came = dict.fromkeys(self.sockets, 0)
        while True:
            now = time.monotonic()
            has_all = all(came[name] >= count for name, count in command['atLeast'].items())
            may_end = has_all or now - started > command['patienceMs'] / 1000
            if may_end and now - last > command['quietMs'] / 1000:
                break
            for key, _events in listening.select(0.01):
                for _ in range(64):
                    frame = receive(key.fileobj)
                    if frame is None:
                        break
                    total += 1
                    if not frame.startswith(IPV6_MULTICAST):
                        last = time.monotonic()
                        came[key.data] += 1
                    counts = captured[key.data]
                    counts[frame] = counts.get(frame, 0) + 1
            if total > command['atMostFrames'] or time.monotonic() - started > command['atMostMs'] / 1000:
                is_cut = True
                self.cut()
                break
        return {
            'cut': is_cut,
            'captured': {
                name: [[frame.hex(), count] for frame, count in counts.items()] for name, counts in captured.items()
            },
        }


def main():
    # An interrupted run ends this process by closing its input, when the storm has been cut.
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    probe = Probe()
    try:
        for line in sys.stdin:
            command = json.loads(line)
            try:
                answer = getattr(probe, command['do'])(command)
            except Exception as problem:
                answer = {'problem': f'{type(problem).__name__}: {problem}'}
            print(json.dumps(answer), flush=True)
    finally:
        probe.cut()


main()
