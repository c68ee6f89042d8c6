// Reads DXF files with the npm package dxf-parser and prints what it found of their
// polylines as JSON, one object a file, in the order of the arguments.
"use strict";
const { readFileSync } = require("fs");
const DxfParser = require("dxf-parser").DxfParser || require("dxf-parser");

const found = process.argv.slice(2).map((name) => {
  const file = new DxfParser().parseSync(readFileSync(name, "latin1"));
  const outlines = file.entities.filter((e) => e.type === "LWPOLYLINE" || e.type === "POLYLINE");
  return {
    Insunits: file.header.$INSUNITS || 0,
    Count: file.entities.length,
    Polylines: outlines.map((e) => ({
      Layer: e.layer,
      Closed: e.shape,
      Vertices: e.vertices.map((v) => [v.x, v.y, v.bulge || 0]),
    })),
  };
});
console.log(JSON.stringify(found));
