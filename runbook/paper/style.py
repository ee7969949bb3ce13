"""How the paper looks: for A4 and for a printer without colour, so nothing is told by colour or grey alone."""

from __future__ import annotations

from typing import Final

STYLE: Final = """
@page { size: A4; margin: 14mm 14mm 16mm 14mm; }
* { box-sizing: border-box; }
body { font: 10.5pt/1.35 "Liberation Sans", Arial, Helvetica, sans-serif; color: #000; background: #fff;
  max-width: 182mm; margin: 0 auto; }
h1 { font-size: 17pt; margin: 0 0 2mm; }
h2 { font-size: 13pt; margin: 6mm 0 2mm; border-bottom: 0.6mm solid #000; break-after: avoid; }
h3 { font-size: 11pt; margin: 4mm 0 1mm; break-after: avoid; }
p { margin: 1mm 0; }
section.sheet { break-before: page; }
.facts { font-size: 9pt; }
.facts td { padding: 0.4mm 3mm 0.4mm 0; vertical-align: top; }
.facts td:first-child { white-space: nowrap; font-weight: bold; }
.line { display: grid; grid-template-columns: 7mm 13mm 1fr; column-gap: 2mm; padding: 1.6mm 0;
  border-top: 0.2mm solid #000; break-inside: avoid; }
.box { width: 5mm; height: 5mm; border: 0.4mm solid #000; margin-top: 0.5mm; }
.number { font-weight: bold; }
.act { font-size: 11.5pt; }
.who { font-size: 9pt; }
.see, .ifnot, .left { font-size: 9.5pt; }
.warning { border: 0.8mm solid #000; padding: 1.5mm 2.5mm; margin: 2mm 0 0 22mm; break-inside: avoid;
  break-after: avoid; font-size: 10pt; }
.warning b { font-size: 11pt; letter-spacing: 0.3mm; }
.stop { border: 0.8mm solid #000; padding: 2mm 2.5mm; margin: 2mm 0; break-inside: avoid; }
.fields { display: flex; flex-wrap: wrap; gap: 1mm 5mm; margin-top: 1mm; font-size: 9.5pt; }
.field { white-space: nowrap; }
.blank { display: inline-block; border-bottom: 0.3mm solid #000; min-width: 26mm; height: 5mm; }
.wide { min-width: 48mm; }
table.grid { border-collapse: collapse; width: 100%; font-size: 9.5pt; break-inside: auto; }
table.grid th, table.grid td { border: 0.2mm solid #000; padding: 0.8mm 1.6mm; text-align: left; vertical-align: top; }
table.grid tr { break-inside: avoid; }
table.grid th { border-bottom-width: 0.5mm; }
table.numbers td, table.numbers th { text-align: right; }
table.acts-table { font-size: 8.4pt; }
table.acts-table td { padding: 0.5mm 1.2mm; }
table.acts-table td:nth-child(1) { width: 30mm; }
table.acts-table td:nth-child(2) { width: 76mm; }
ul.list { list-style: none; padding-left: 2mm; margin: 1mm 0; }
.card { border: 0.6mm solid #000; padding: 4mm; margin: 3mm 0; break-inside: avoid; }
.card .big { font-size: 19pt; font-weight: bold; line-height: 1.15; }
.card .huge { font-size: 30pt; font-weight: bold; line-height: 1.1; }
.pair { display: grid; grid-template-columns: 78mm 1fr; gap: 5mm; align-items: start; }
.dial { width: 76mm; height: 76mm; }
.dial .rim { fill: none; stroke: #000; stroke-width: 2; }
.dial .scale { fill: none; stroke: #000; stroke-width: 1.2; }
.dial .never { fill: none; stroke: #000; stroke-width: 11; stroke-dasharray: 3 3; }
.dial .tick, .dial .mark { stroke: #000; stroke-width: 1.2; }
.dial .mark { stroke-width: 2.4; }
.dial .ceiling { stroke: #000; stroke-width: 3.4; }
.dial text { font: 12px "Liberation Sans", Arial, sans-serif; text-anchor: middle; fill: #000; }
.dial .small { font-size: 10px; }
.dial .name { font-size: 15px; font-weight: bold; }
ol.acts { margin: 0; padding-left: 6mm; }
.foot { font-size: 8.5pt; margin-top: 3mm; }
@media screen { body { padding: 8mm; } section.sheet { margin-top: 14mm; } }
"""
"""The style sheet; nothing is fetched from anywhere."""
