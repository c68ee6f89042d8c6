#= @: found "R"; words G X Y Z A B C I J R F S T D H N O M P are read here
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G81 X1 Z-1 ▸R2
M30
%
