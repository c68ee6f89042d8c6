#= @: found D3; D stands with G41 or G42
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G1 X1 ▸D3
M30
%
