#= @: found R5; an arc with R ends elsewhere than it starts
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G0 X1 Y1
G2 X1 Y1 ▸R5 F100
M30
%
