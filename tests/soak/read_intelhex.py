"""Reads Intel HEX files named as arguments with python3-intelhex; prints {file: [[first, last, sha256], ...] or error text}."""

import hashlib
import json
import sys

from intelhex import IntelHex


def read(name):
    try:
        image = IntelHex(name)
        return [
            [start, stop - 1, hashlib.sha256(image.tobinstr(start=start, size=stop - start)).hexdigest()]
            for start, stop in image.segments()
        ]
    except Exception as error:  # whatever the library refuses with
        return f"{type(error).__name__}: {error}"


print(json.dumps({name: read(name) for name in sys.argv[1:]}))
