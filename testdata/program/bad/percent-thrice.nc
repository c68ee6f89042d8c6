#= @: found a %; % stands once before and once after the program
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G0 X1
%
▸%