#= @: found O9; the program number stands once, in the first block
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
▸O9
M30
%
