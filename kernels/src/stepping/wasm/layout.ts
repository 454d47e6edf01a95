/**
 * Where things lie in the memory that the WebAssembly kernel shares with its callers. Both sides read this file: it holds plain
 * numbers only, in bytes unless the name says otherwise. Every address is a byte offset into the memory.
 */

/** Numbers in one vector, and its bytes. */
export const LANES = 4;
export const VECTOR_BYTES = 16;
export const CACHE_LINE_BYTES = 64;
/** Vectors of one turn of a loop over one medium outside the layers: its runs are whole turns. */
export const TURN_VECTORS = 4;

/**
 * The control block, from here to CONTROL_END: what threads write often lies in cache lines of its own.
 *
 * COMMAND is raised by one for each job; helpers sleep on it.
 */
export const COMMAND = 1024;
/** 1: helpers return. */
export const QUIT = 1028;
/** The next part of the job to be claimed: epoch × 65536 + part. */
export const NEXT = 1088;
/** Parts of the job: epoch × 65536 + count. */
export const LIMIT = 1152;
/** Parts of an energy job that are done, and whether somebody sleeps until they are. */
export const DONE = 1216;
/** What the job is: one of JOB_…. */
export const JOB = 1280;
export const JOB_STEPS = 0;
export const JOB_ENERGY = 1;
/** Steps of the job. */
export const STEPS = 1284;
export const FIELD_F = 1288;
export const FIELD_GX = 1292;
export const FIELD_GY = 1296;
export const ROW_BYTES = 1300;
/** Last row of the lattice that is stepped. */
export const LAST_ROW = 1304;
/** The row table. */
export const TABLE = 1308;
export const SIGNALS = 1312;
/** Bytes of one step's signals, and of one step's records. */
export const SIGNAL_BYTES = 1316;
export const RECORDS = 1320;
export const RECORD_BYTES = 1324;
/** Parameters of the layers along x, six vectors for each vector of columns. */
export const COLUMN_LAYERS = 1328;
/** Section of the energy: rows and columns, both ends counted; one sum a row goes to ENERGY_SUMS. */
export const ENERGY_FIRST_ROW = 1332;
export const ENERGY_LAST_ROW = 1336;
export const ENERGY_FIRST_COLUMN = 1340;
export const ENERGY_LAST_COLUMN = 1344;
export const ENERGY_SUMS = 1348;
/** Δt/4 in seconds, a float64. */
export const QUARTER_STEP = 1352;
/** What to set to zero after each step of the job, FLUSH_BYTES a step. */
export const FLUSHES = 1364;
/** Bytes of a row's ψ along x. */
export const STRIP_BYTES = 1376;
/** How often a waiting thread looks before it sleeps. */
export const SPINS = 1360;

/** Progress of each block of steps: rows done by its last step, and whether somebody sleeps on it. */
export const PROGRESS = 2048;
export const WAITING = 4;
export const MOST_BLOCKS = 256;
/** The first byte behind the control block and the progress table. */
export const CONTROL_END = 18432;

/** Rows of one part of an energy job. */
export const ENERGY_PART_ROWS = 64;

/** A step's plan: below which magnitude numbers of the three fields become zero, as float32; 0 for no flush. */
export const FLUSH_BYTES = 16;
export const FLUSH_LIMIT_F = 0;
export const FLUSH_LIMIT_GX = 4;
export const FLUSH_LIMIT_GY = 8;

/** An entry of the row table. */
export const ENTRY_BYTES = 80;
export const ENTRY_RUNS = 0;
export const ENTRY_RUNS_END = 4;
export const ENTRY_DRIVES = 8;
export const ENTRY_DRIVES_END = 12;
export const ENTRY_TAPS = 16;
export const ENTRY_TAPS_END = 20;
/** ψ of ∂F/∂x and ∂Gy/∂x of this row: address of what belongs to column 0 of the left strip. */
export const ENTRY_PSI_GY = 24;
export const ENTRY_PSI_FX = 28;
/** ψ of ∂F/∂y and ∂Gx/∂y of this row; 0 outside the layers along y. */
export const ENTRY_PSI_GX = 32;
export const ENTRY_PSI_FY = 36;
/** decay, gain and stretch of the row, of G and of F, as float32. */
export const ENTRY_LAYER = 40;
/** The memories of the row's points; 0 where there are none. */
export const ENTRY_MEMORIES = 64;

/** The row's branches; 0 where there are none. */
export const ENTRY_BRANCHES = 68;

/** Where the row's couplings begin and end. */
export const ENTRY_COUPLINGS = 72;
export const ENTRY_COUPLINGS_END = 76;

/** A coupling: addresses of F, gx and gy at its column, and its factor as float32. */
export const COUPLING_BYTES = 16;
export const COUPLING_GX = 4;
export const COUPLING_GY = 8;
export const COUPLING_FACTOR = 12;

/** Branches of a row: where its draws begin and end, which are drives with the address of their signal, then its branches. */
export const BRANCHES_HEADER_BYTES = 16;
export const BRANCHES_DRAWS = 0;
export const BRANCHES_DRAWS_END = 4;
export const BRANCHES_FIRST = 8;
export const BRANCHES_END = 12;
/** A branch: addresses of its four points and of its numbers, then as float64 its weights, κ, q and Σ|w|. Points too many weigh 0. */
export const BRANCH_BYTES = 80;
export const BRANCH_STATE = 16;
export const BRANCH_WEIGHTS = 24;
export const BRANCH_DECAY = 56;
export const BRANCH_CONDUCTANCE = 64;
export const BRANCH_TOTAL = 72;

/** Memories of a row: the span of columns that they correct, then their terms, TERM_BYTES each. */
export const MEMORIES_HEADER_BYTES = 32;
/** Bytes from the row's column 0, and bytes of the span. */
export const MEMORIES_FROM = 0;
export const MEMORIES_BYTES = 4;
/** Addresses of what waits to be added to gx, gy and F, and of bF, by column of the span. */
export const MEMORIES_PENDING_GX = 8;
export const MEMORIES_PENDING_GY = 12;
export const MEMORIES_PENDING_F = 16;
export const MEMORIES_B_F = 20;
export const MEMORIES_TERMS = 24;

export const TERM_BYTES = 64;
/** FIELD_F, FIELD_GX or FIELD_GY. */
export const TERM_FIELD = 0;
export const TERM_FROM = 4;
export const TERM_LENGTH = 8;
/** Addresses by column of the term: what waits, weights, the memory's first number and its second (0: it has one). */
export const TERM_PENDING = 12;
export const TERM_WEIGHTS = 16;
export const TERM_FIRST = 20;
export const TERM_SECOND = 24;
/** Four numbers of `step`, then two of `feed`, as float32. */
export const TERM_STEP = 32;
export const TERM_FEED = 48;

/** A run: neighbouring vectors of one row that are stepped by one loop. Its coefficients follow its header. */
export const RUN_HEADER_BYTES = 16;
/** Which loop: one of RUN_…, plus LAYER_X and LAYER_Y. */
export const RUN_KIND = 0;
/** Bytes from the row's column 0. */
export const RUN_FROM = 4;
export const RUN_BYTES = 8;
/** Added to RUN_FROM to reach ψ of the layers along x. */
export const RUN_PSI_SHIFT = 12;
/** a = 1 in all three fields: aGx, bGx, aGy, bGy, aF, bF once. */
export const RUN_LOSSLESS = 0;
/** The same six numbers once. */
export const RUN_UNIFORM = 1;
/** Six vectors for each vector. */
export const RUN_VARIED = 2;
/** All coefficients are zero. No numbers follow. */
export const RUN_ZERO = 3;
export const LAYER_X = 4;
export const LAYER_Y = 8;
export const SCALARS_BYTES = 32;
export const VARIED_BYTES = 96;

/** A drive: address of the number, index of the signal, and b·weight as float64. */
export const DRIVE_BYTES = 16;
/** A tap: address of the number, bytes into the step's records, and the weight as float64. */
export const TAP_BYTES = 16;
