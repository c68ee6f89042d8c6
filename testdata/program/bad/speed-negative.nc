#= @: found S-100; S takes a whole number
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
▸S-100
M30
%
