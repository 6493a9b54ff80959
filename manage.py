#!/usr/bin/env python3
"""Quartersky's one command. It sets itself up on first use; see README.md."""

import sys

if sys.version_info < (3, 11) or sys.version_info >= (3, 14):
    sys.stderr.write(
        "Quartersky runs on Python 3.11, 3.12 or 3.13; this is Python {}.{}.\n"
        "Start it with one of those, for example: python3.12 manage.py rehearse\n".format(
            *sys.version_info[:2]
        )
    )
    sys.exit(3)

from campaigns.project.set_up import command_line

if __name__ == "__main__":
    sys.exit(command_line.main(sys.argv))
