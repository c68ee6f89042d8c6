#= @: found H3; H stands with G43
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G1 Z1 ▸H3
M30
%
