// Source: the project's method notes; kept unchanged below as the yardstick for speed. Built and run by api/bin/bench.ts.
// Brute-force C of the joined chain (plain gust + 264 draws; no loss, durations or quantiles) for the worked storm of METHODS-CHAIN 5b: the yardstick for speed ratios.
// Prints its own time without set-up; compare in interleaved pairs. Sites come from the small generator below (32-bit LCG, one draw per statement).
// gcc -O3 -march=native -ffast-math brute.c -o brute -lm ; ./brute N   (first 5 sites are the worked example)
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <math.h>
#include <time.h>
#define R 6371000.0
#define D2R (M_PI/180)
static double now(){struct timespec t;clock_gettime(CLOCK_MONOTONIC,&t);return t.tv_sec+1e-9*t.tv_nsec;}
typedef struct{double t,lat,lon,pc,penv,vm,rm,A1,vax,om;}Fix;
static Fix fx[5]={{0,22.0,179.20,955,1010,50,40e3,0.10039848,46.591525,7.01811265e-4},{21600,23.1,179.55,950,1010,52,38e3,0.11398497,48.430805,7.67912078e-4},{43200,24.3,179.95,948,1010,53,36e3,0.11899984,49.109698,8.21936314e-4},{64800,25.6,-179.60,960,1010,46,40e3,0.06461389,41.747157,6.28840236e-4},{86400,27.0,-179.00,978,1010,34,48e3,0,29.541312,3.70818968e-4}};
static double dist(double a,double b,double c,double d){double s1=sin((c-a)*D2R/2),s2=sin((d-b)*D2R/2);double h=s1*s1+cos(a*D2R)*cos(c*D2R)*s2*s2;return 2*R*asin(fmin(1,sqrt(h)));}
static double bear(double a,double b,double c,double d){double dl=(d-b)*D2R;double y=sin(dl)*cos(c*D2R),x=cos(a*D2R)*sin(c*D2R)-sin(a*D2R)*cos(c*D2R)*cos(dl);return fmod(atan2(y,x)/D2R+360,360);}
static void pos(double t,double*la,double*lo){int i=0;while(i<3&&t>=fx[i+1].t)i++;double w=(t-fx[i].t)/(fx[i+1].t-fx[i].t);double om=dist(fx[i].lat,fx[i].lon,fx[i+1].lat,fx[i+1].lon)/R;double a=sin((1-w)*om)/sin(om),b=sin(w*om)/sin(om);double p[3];double A[2]={fx[i].lat*D2R,fx[i].lon*D2R},B[2]={fx[i+1].lat*D2R,fx[i+1].lon*D2R};p[0]=a*cos(A[0])*cos(A[1])+b*cos(B[0])*cos(B[1]);p[1]=a*cos(A[0])*sin(A[1])+b*cos(B[0])*sin(B[1]);p[2]=a*sin(A[0])+b*sin(B[0]);*la=atan2(p[2],hypot(p[0],p[1]))/D2R;*lo=atan2(p[1],p[0])/D2R;}
typedef struct{double t,lat,lon,c,hd,rm,f,B,dp,A1v,th;}St;
#define T 1441
static St st[T];
static double ks(double r){return r<=100e3?0.857142857142857:r>=700e3?0.714285714285714:0.857142857142857+(r-100e3)/600e3*(0.714285714285714-0.857142857142857);}
static void prep(){for(int k=0;k<T;k++){double t=60.0*k;St*s=st+k;s->t=t;pos(t,&s->lat,&s->lon);double a=fmax(0,t-1800),b=fmin(86400,t+1800),la,lo,lb,lp;pos(a,&la,&lo);pos(b,&lb,&lp);s->c=dist(la,lo,lb,lp)/(b-a);s->hd=bear(la,lo,lb,lp);int i=0;while(i<3&&t>=fx[i+1].t)i++;double w=(t-fx[i].t)/(fx[i+1].t-fx[i].t);
#define L(q) (fx[i].q+w*(fx[i+1].q-fx[i].q))
 s->rm=L(rm);s->f=2*7.292115e-5*sin(fabs(s->lat)*D2R);double dp=fmax(L(penv)-L(pc),1)*100,vgm=fmax(L(vm)/1.05-0.55*s->c,5)/ks(s->rm);double b0=(vgm*vgm+vgm*s->f*s->rm)*1.15*M_E/dp,Bc=fmin(fmax(b0,0.8),2.5);s->B=Bc;s->dp=dp*b0/Bc;{double Hb[4]={0,0,2.8,8.8};double H=Hb[i]>0?fmax(0,Hb[i]-(fx[i+1].t-t)/3600):0;s->A1v=L(A1)*L(vax)*exp(-H/2);}
 double th=0;for(int j=0;j<4;j++){if(t<=fx[j].t)break;double e=fmin(t,fx[j+1].t);double oe=fx[j].om+(fx[j+1].om-fx[j].om)*(e-fx[j].t)/(fx[j+1].t-fx[j].t);th+=.5*(fx[j].om+oe)*(e-fx[j].t);}s->th=th;}}
static double EX[]={0,.3,.4,.5,.6,.7,.8,.9,1,1.1,1.2,1.3,1.4,1.5,1.7,2.0},EV[]={0,.56,.73,.85,1.03,1.15,1.25,1.10,1.00,.87,.70,.50,.35,.26,.17,0};
static double E(double x){if(x>=2)return 0;int i=0;while(x>EX[i+1])i++;return EV[i]+(x-EX[i])/(EX[i+1]-EX[i])*(EV[i+1]-EV[i]);}
static double an[]={.20,.28,.34,.39,.49,.56,.64,.73,.83,.935,1.1},wn[]={.15,.30,.225,.105,.03,.05,.045,.035,.02,.03,.01};
static double fw(double x,double z0){if(x<=0)return 0;double d=0.28*z0*pow(x/z0,0.8);double w=log(d/10)/log(60);return w<0?0:w>1?1:w;}
int main(int c,char**v){int N=atoi(v[1]);double*lat=malloc(8*N),*lon=malloc(8*N),*z0=malloc(8*N),*w8=malloc(64*N),*kt=malloc(8*N);
 double F=1e5,f2[8]={F,F,F,7863,5560,7863,F,F};unsigned s=12345;
#define RND (s=s*1664525u+1013904223u,s/4294967296.0)
 for(int i=0;i<N;i++){lat[i]=22+5*RND;lon[i]=178.4+2.6*RND;if(lon[i]>180)lon[i]-=360;{double a=RND;double b=RND;z0[i]=a<.3?0:0.03+0.4*b;}kt[i]=1;for(int k=0;k<8;k++){double a=RND;double b=RND;w8[8*i+k]=z0[i]>0?fw(1e5*a*b,z0[i]):0;}}
 double ex[5][4]={{24.30,-179.70,0,1},{25.05,-179.45,.03,1},{25.05,179.79,.03,1},{26.20,-179.10,.3,1.192613},{26.50,179.70,.1,1}};for(int i=0;i<5&&i<N;i++){lat[i]=ex[i][0];lon[i]=ex[i][1];z0[i]=ex[i][2];kt[i]=ex[i][3];for(int k=0;k<8;k++)w8[8*i+k]=z0[i]>0?fw(i<3?f2[k]:F,z0[i]):0;}
 prep();double t0=now();double Tu=3.12*pow(10,.2),nu=(0.007+0.213*pow(Tu/3,0.654))/Tu,y=sqrt(2*log(600*nu)),gf=(y+.577/y)*(1-0.193*pow(Tu/3+.1,-.68));
 double ph[24];for(int j=0;j<24;j++)ph[j]=2*M_PI*(j+.5)/24;double chk=0;long ev=0;double tp=0;
 float*pk=malloc(4L*264);double*out=malloc(8L*N*2);
 for(int i=0;i<N;i++){double best=0;double G[264];memset(G,0,sizeof G);int used[T],nu_=0;
  for(int k=0;k<T;k+=5){double r0=dist(st[k].lat,st[k].lon,lat[i],lon[i]);int near=r0<2*st[k].rm;if(!near&&k+5<T)near=dist(st[k+5].lat,st[k+5].lon,lat[i],lon[i])<2*st[k+5].rm;used[nu_++]=k;if(near)for(int q=1;q<5&&k+q<T;q++)used[nu_++]=k+q;}
  for(int u=0;u<nu_;u++){St*S=st+used[u];ev++;double r=fmax(dist(S->lat,S->lon,lat[i],lon[i]),1),th=bear(S->lat,S->lon,lat[i],lon[i]);double x=pow(S->rm/r,S->B),fr=.5*S->f*r;double vs=ks(r)*(sqrt(S->B*S->dp/1.15*x*exp(-x)+fr*fr)-fr);double q=r/S->rm;double beta=q<1?10*(1+q):q<1.2?20+25*(q-1):25;double to=(th-90-beta)*D2R,tb=(S->hd-20)*D2R;double uu=vs*sin(to)+.55*S->c*sin(tb),vv=vs*cos(to)+.55*S->c*cos(tb);double U=hypot(uu,vv);
   double cd=1e-3*fmin(fmax(.49+.065*U,1.2),2.4),z0s=10*exp(-.4/sqrt(cd));double ius=1/log(10/z0s),mean=U,iu=ius;
   if(z0[i]>0){double dir=fmod(atan2(-uu,-vv)/D2R+360,360)/45;int a=(int)dir;double wq=dir-a;double w=w8[8*i+a%8]*(1-wq)+w8[8*i+(a+1)%8]*wq;double ceq=(.19*pow(z0[i]/.05,.07)*log(10/z0[i]))/(.19*pow(z0s/.05,.07)*log(10/z0s));mean=U*(1+w*(ceq-1));iu=ius+w*(1/log(10/z0[i])-ius);}
   double g=mean*(1+gf*iu)*kt[i];if(g>best)best=g;
   double h=S->A1v*E(q)/(1.05*U);double ang=4*((90-th)*D2R-S->th);
   if(h!=0){for(int j=0;j<24;j++){double cc=cos(ang-ph[j]);double C=(cc+cc*cc-.5)/1.5;double hc=g*h*C;for(int n=0;n<11;n++){double z=g+an[n]*hc;if(z>G[n*24+j])G[n*24+j]=z;}}}else{for(int d=0;d<264;d++)if(g>G[d])G[d]=g;}}
  double m=0;for(int n=0;n<11;n++)for(int j=0;j<24;j++)m+=wn[n]/24*G[n*24+j];out[2*i]=best;out[2*i+1]=m;chk+=m;if(i<5)printf("S%d plain %.6f mean %.6f times %d\n",i+1,best,m,nu_);}
 double t1=now();printf("N %d  %.3f s  %.1f us/site  %.1f ns/eval (%ld evals)  check %.6f\n",N,t1-t0,(t1-t0)/N*1e6,(t1-t0)/ev*1e9,ev,chk);}
