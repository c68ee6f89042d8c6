#= @: found X2; an arc needs its center as I and J, or R
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G0 X1 Y1
G2 ▸X2 Y1
M30
%
