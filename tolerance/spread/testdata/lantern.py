# The two oscillators of data/examples/lantern.yaml with the parts that its plan
# picks, simulated independently with numpy 1.24.2 and scipy 1.10.1: draws, lots,
# the tuner trimmed by bisection, the changes of the beat. The figures it prints
# are in example_test.go.
import numpy as np
from scipy.stats import norm
rng=np.random.default_rng(7)
B,U=4000,24
def F_norm(u): # truncated normal sigma 1/3 at +-1
    a=norm.cdf(-3); return norm.ppf(a+u*(1-2*a))/3
def F_uni(u): return 2*u-1
def lot(n,rho,shape):
    g0=rng.standard_normal((1,B,1)); g=rng.standard_normal((n,B,U))
    return shape(norm.cdf(np.sqrt(rho)*g0+np.sqrt(1-rho)*g))
def solo(shape): return shape(rng.random((B,U)))
# coil: powdered-iron-toroid 5%: tc 190+-60, corr .6/.9, ageing 0+-0.05%/decade corr temp
zL=lot(2,.6,F_norm); aL=(190+60*lot(2,.9,F_norm))*1e-6; gL=0.0005*lot(2,.9,F_norm)
# caps: polystyrene 5%: tc -125+-60, hum 25+-25 ppm/%RH, ageing 0+-0.1 %, corr .5/.8
zC=lot(4,.5,F_norm); aC=(-125+60*lot(4,.8,F_norm))*1e-6; hC=(25+25*lot(4,.8,F_norm))*1e-4; gC=0.001*lot(4,.8,F_norm)
# film trimmer 10%: tc -200+-200, hum 100+-50, ageing 0+-.2%; corr .5/.8
zlo=lot(1,.5,F_norm)[0]; zhi=lot(1,.5,F_norm)[0]; aT=(-200+200*lot(1,.8,F_norm)[0])*1e-6; gT=0.002*lot(1,.8,F_norm)[0]
s1=7e-12*(1+.2*solo(F_uni)); s2=20e-12*(1+.1*solo(F_uni)); r1=4*(1+.15*solo(F_uni)); r2=3*(1+.15*solo(F_uni))
dec=np.log10(24)
def freq(t,w,setting,hand):
    d1=t+w*r1-25; d2=t+w*r2-25
    L=[1.8e-3*(1+.05*zL[i])*(1+aL[i]*d)*(1+gL[i]*dec) for i,d in ((0,d1),(1,d2))]
    C=[220e-12*(1+.05*zC[i])*(1+aC[i]*d)*(1+gC[i]*dec) for i,d in ((0,d1),(1,d1),(2,d2),(3,d2))]
    T=(4e-12*(1+.1*zlo)+setting*(34e-12*(1+.1*zhi)-4e-12*(1+.1*zlo)))*(1+aT*d1)*(1+gT*dec)
    c1=C[0]*C[1]/(C[0]+C[1])+T+s1; c2=C[2]*C[3]/(C[2]+C[3])+s2+hand
    return 1/(2*np.pi*np.sqrt(L[0]*c1)),1/(2*np.pi*np.sqrt(L[1]*c2))
def off(*a):
    f=freq(*a); return f[0]-f[1]
err=2*(2*rng.random((B,U))-1)
lo=np.zeros((B,U)); hi=np.ones((B,U))
a0=off(23,1,lo,0)-250; a1=off(23,1,hi,0)-250
ok=a0*a1<=0
for _ in range(60):
    m=(lo+hi)/2; v=off(23,1,m,0)-250-err
    up=v>0; lo=np.where(up,m,lo); hi=np.where(up,hi,m)
s=(lo+hi)/2
base=off(23,1,s,0)
for name,a,lim in (("switch on",(23,0),30),("cool hall",(15,1),75)):
    d=off(a[0],a[1],s,0)-base
    print(name,"mean",d[ok].mean(),"sd",d[ok].std(),"share",(ok&(abs(d)<=lim)).mean(), "q",np.quantile(d[ok],[.025,.975]))
h=off(23,1,s,1.2e-12)
print("hand",h[ok].mean(),h[ok].std(),"share",(ok&(abs(h)>=1400)&(abs(h)<=2100)).mean()); print("reach",ok.mean(),"setting",s[ok].mean())
f=freq(23,1,s,0); print("fixed f",f[0].mean(),f[0].std())
