#= @: found M6; M6 follows a T word
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
▸M6
M30
%
