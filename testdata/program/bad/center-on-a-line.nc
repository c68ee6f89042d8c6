#= @: found X1; I and J stand with G2 or G3
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G1 ▸X1 I1
M30
%
