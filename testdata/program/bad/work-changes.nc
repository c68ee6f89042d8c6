#= @: found G55; the work coordinate system does not change inside a program
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
▸G55
M30
%
