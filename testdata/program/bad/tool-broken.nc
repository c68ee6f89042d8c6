#= @: found T1.5; T takes a whole number
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
▸T1.5
M30
%
