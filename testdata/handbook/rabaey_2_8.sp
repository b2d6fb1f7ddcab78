Body effect
* Rabaey, Digital Integrated Circuits, example 2.8 (title from memory): VT0 = 0.75 V, gamma = 0.54,
* 2 phi F = 0.6 V, VSB = 5 V raise the threshold to 1.610 V; 0.5 %.
.model n1 nmos level=1 kp=20u vto=0.75 gamma=0.54 phi=0.6
M_a d g s 0 n1 W=2u L=1u
*@ bias v(s)=5 v(d)=5.1 v(g)=9
*@ expect m_a vth=1.602..1.618
.end
