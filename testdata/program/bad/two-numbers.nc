#= @: found N2; a block has one N
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
N1 ▸N2 G1 X1
M30
%
