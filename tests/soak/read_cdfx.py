"""Reads a values file named as argument with xml.etree; prints per SW-INSTANCE its name, category, values in document order and axes."""

import json
import sys
import xml.etree.ElementTree as tree


def values(element):
    phys = element.find("SW-VALUES-PHYS") if element is not None else None
    if phys is None:
        return []
    return [float(v.text) if v.tag == "V" else v.text or "" for v in phys.iter() if v.tag in ("V", "VT")]


def groups(element):
    phys = element.find("SW-VALUES-PHYS") if element is not None else None
    return 0 if phys is None else sum(1 for _ in phys.iter("VG"))


def read(instance):
    content = instance.find("SW-INSTANCE-PROPS-VARIANTS/SW-INSTANCE-PROPS-VARIANT")
    held = content.find("SW-VALUE-CONT")
    return {
        "name": instance.findtext("SHORT-NAME"),
        "category": instance.findtext("CATEGORY"),
        "unit": held.findtext("UNIT-DISPLAY-NAME") or "",
        "values": values(held),
        "groups": groups(held),
        "axes": [
            axis.findtext("SW-INSTANCE-REF") or values(axis) for axis in content.iterfind("SW-AXIS-CONTS/SW-AXIS-CONT")
        ],
    }


print(json.dumps([read(instance) for instance in tree.parse(sys.argv[1]).iter("SW-INSTANCE")]))
