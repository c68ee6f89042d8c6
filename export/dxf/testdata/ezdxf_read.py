"""Reads DXF files with ezdxf, strictly and in its recovery mode, audits them, and
prints what it found as JSON, one object a file and mode, in the order of the arguments."""

import json
import sys

import ezdxf
from ezdxf import recover


def text(value, decode):
    return [value.dxf.layer, decode(value.plain_text()), list(value.dxf.insert)[:2], value.dxf.height, value.dxf.rotation]


def outline(e):
    if e.dxftype() == "LWPOLYLINE":
        return [e.dxf.layer, bool(e.closed), [list(p) for p in e.get_points("xyb")]]
    points = [[v.dxf.location.x, v.dxf.location.y, v.dxf.get("bulge", 0)] for v in e.vertices]
    return [e.dxf.layer, bool(e.is_closed), points]


def describe(doc, auditor, decode):
    space = doc.modelspace()
    return {
        "version": doc.dxfversion,
        "insunits": doc.header.get("$INSUNITS", 0),
        "extmin": list(doc.header["$EXTMIN"])[:2],
        "extmax": list(doc.header["$EXTMAX"])[:2],
        "errors": [e.message for e in auditor.errors],
        "fixes": [e.message for e in auditor.fixes],
        "layers": {layer.dxf.name: layer.dxf.linetype for layer in doc.layers},
        "count": len(space),
        "polylines": [outline(e) for e in space.query("LWPOLYLINE POLYLINE")],
        "circles": [[e.dxf.layer, e.dxf.center.x, e.dxf.center.y, e.dxf.radius] for e in space.query("CIRCLE")],
        "arcs": [
            [e.dxf.layer, e.dxf.center.x, e.dxf.center.y, e.dxf.radius, e.dxf.start_angle, e.dxf.end_angle]
            for e in space.query("ARC")
        ],
        "lines": [[e.dxf.layer, *list(e.dxf.start)[:2], *list(e.dxf.end)[:2]] for e in space.query("LINE")],
        "texts": [text(e, decode) for e in space.query("TEXT")],
    }


def main():
    found = []
    for name in sys.argv[1:]:
        doc = ezdxf.readfile(name)
        # Of the two modes, recovery alone decodes \U+XXXX by itself.
        found.append(describe(doc, doc.audit(), ezdxf.decode_dxf_unicode))
        found.append(describe(*recover.readfile(name), str))
    json.dump(found, sys.stdout)


main()
