#= @: found G20; the units do not change inside a program
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
▸G20
M30
%
