#= @: found R5; an arc has I and J, or R
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G0 X1 Y1
G2 X2 Y1 I1 J0 ▸R5 F100
M30
%
