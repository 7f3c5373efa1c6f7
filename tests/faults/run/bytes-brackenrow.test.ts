import { describeByteSweep } from "./byte-sweep";

describeByteSweep("brackenrow", { backup: { once: 5, lasting: 29 }, run: { once: 61, lasting: 163 }, "put-back": { once: 31, lasting: 109 } }, 1450);
