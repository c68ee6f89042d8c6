#= @: found X1; under G93 every feed move has its own F
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G93 G1 ▸X1
M30
%
