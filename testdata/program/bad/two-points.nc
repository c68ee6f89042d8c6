#= @: found "1.2.3" after X; a number is an optional sign, digits, and at most one point
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G1 X▸1.2.3
M30
%
