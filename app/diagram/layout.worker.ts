/** The layout beside the page: the worker half of elkjs listens by itself once it is loaded. */
import "elkjs/lib/elk-worker.min.js";
