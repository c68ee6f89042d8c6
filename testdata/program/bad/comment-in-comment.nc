#= @: found a comment that does not end; comments end with ) on their line and hold no (
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
▸(a (b) c)
M30
%
