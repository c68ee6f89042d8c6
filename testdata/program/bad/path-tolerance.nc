#= @: found P-1; P of G64 is not below 0
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G0 X1 Y1
G64 ▸P-1
M30
%
