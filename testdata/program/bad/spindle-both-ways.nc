#= @: found M3; M3 and M4 contradict each other
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
▸M3 M4
M30
%
