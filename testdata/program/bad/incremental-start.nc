#= @: found X5; an incremental move needs a known start: move there with G90 first
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G91 G1 ▸X5 F100
M30
%
