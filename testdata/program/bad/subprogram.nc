#= @: found M98; M0 M1 M2 M3 M4 M5 M6 M7 M8 M9 M30 are read here, each once a block
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
▸M98 P1000
M30
%
