#= @: found "123456789" after X; numbers up to 9000000 are read
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G1 X▸123456789
M30
%
