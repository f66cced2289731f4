"""Runs one Swift server (proxy, account, container or object) with a swift.conf of our own.

Debian's start scripts read the secrets that place the data from /etc/swift/swift.conf only. Ours belong to one data
folder and must move with it, so the folder is set here before the rest of Swift is loaded.

    python3 storage-server.py <proxy|account|container|object> <configuration file>
"""
import os
import sys

from swift.common import utils


def main(kind, configuration):
    utils.set_swift_dir(os.path.dirname(os.path.abspath(configuration)))
    from swift.common.wsgi import run_wsgi
    options = {'verbose': True}
    if kind == 'object':
        from swift.obj import server
        options['global_conf_callback'] = server.global_conf_callback
    return run_wsgi(configuration, kind + '-server', **options)


if __name__ == '__main__':
    sys.exit(main(*sys.argv[1:]))
