"""Writes Swift's rings for one machine: which port serves accounts, containers and objects.

Stored data depends on the part power (6) and the device name (d1), never on the ports, so rings may be written anew
at each start.

    python3 storage-rings.py <folder> account=<port> container=<port> object=<port>
"""
import os
import sys

from swift.common.ring import RingBuilder

PART_POWER = 6


def write_ring(folder, name, port):
    builder = RingBuilder(PART_POWER, 1, 0)
    builder.add_dev({
        'id': 0, 'region': 1, 'zone': 1, 'device': 'd1', 'weight': 1.0, 'meta': '',
        'ip': '127.0.0.1', 'port': port, 'replication_ip': '127.0.0.1', 'replication_port': port,
    })
    builder.rebalance()
    builder.get_ring().save(os.path.join(folder, name + '.ring.gz'))


def main(folder, *services):
    for service in services:
        name, port = service.split('=')
        write_ring(folder, name, int(port))


if __name__ == '__main__':
    main(*sys.argv[1:])
