#= @: found F0; a feed is above 0
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
▸F0
M30
%
