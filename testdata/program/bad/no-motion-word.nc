#= @: found X1; a move needs G0, G1, G2 or G3 before it
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
▸X1
M30
%
