#= @: found R0.4; R is at least half the way from start to end, 0.5
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G0 X1 Y1
G2 X2 Y1 ▸R0.4 F100
M30
%
