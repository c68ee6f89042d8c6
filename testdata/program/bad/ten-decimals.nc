#= @: found "1.0000000001" after X; at most 9 decimals are read
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G1 X▸1.0000000001
M30
%
