#= @: found R-5; R is above 0: an arc above half a turn is split
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G0 X1 Y1
G2 X2 Y1 ▸R-5 F100
M30
%
