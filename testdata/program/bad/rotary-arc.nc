#= @: found A3; a rotary word stands with G0 and G1
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G0 X1 Y1
G2 X2 I1 ▸A3
M30
%
