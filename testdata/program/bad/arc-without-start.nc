#= @: found X1; an arc needs a known start
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G2 ▸X1 Y1 I1 J0
M30
%
