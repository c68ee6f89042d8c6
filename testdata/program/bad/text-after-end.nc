#= @: found text after the closing %; nothing follows it
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
M30
%
▸G0 X1