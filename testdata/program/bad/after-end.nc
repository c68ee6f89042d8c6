#= @: found G0 after the end of the program; nothing follows M2 or M30 but %
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
M30
▸G0 X1