/* fixture_ab.h: parts A and B, invented: B's SOA falls faster at high voltage and long times. */
#ifndef SUPPORT_FIXTURE_AB_H
#define SUPPORT_FIXTURE_AB_H

#define PART_A                                                                                     \
    "part=A vds_max=100 tj_max=175 "                                                               \
    "soa=1e-3/10:150,50:25,100:9;1e-2/10:60,50:4,100:1.2;1e-1/10:20,50:1.0,100:0.30 foster= "
#define PART_B                                                                                     \
    "part=B vds_max=100 tj_max=175 "                                                               \
    "soa=1e-3/10:150,50:14,100:4;1e-2/10:60,50:1.6,100:0.45;1e-1/10:20,50:0.4,100:0.10 foster= "

#endif
