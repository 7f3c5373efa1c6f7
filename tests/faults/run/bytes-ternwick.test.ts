import { describeByteSweep } from "./byte-sweep";

describeByteSweep("ternwick", { backup: { once: 3, lasting: 11 }, run: { once: 23, lasting: 61 }, "put-back": { once: 11, lasting: 41 } }, 3500);
