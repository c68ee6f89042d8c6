#= @: found G1; G0 of the same kind stands in this block already
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G0 ▸G1 X1
M30
%
