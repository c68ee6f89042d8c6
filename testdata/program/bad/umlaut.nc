#= @: found byte 0xc3; programs are printable ASCII
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
(f▸ür)
M30
%
