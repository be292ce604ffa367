package backcone.cli;

import java.util.ArrayDeque;
import java.util.Deque;
import java.util.Iterator;
import java.util.List;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import java.util.function.Function;

/** Works on all cores a little ahead of who asks, and answers in order, so that few results are held at a time. */
final class Ahead<A, B> implements AutoCloseable {
    /** In work or waiting, for each core: enough to keep all cores busy behind one slow piece. */
    private static final int EACH = 16;

    /** Deep enough for any nesting that the parser lets through. */
    private static final long STACK = 16L << 20;

    private final int cores;
    private final ExecutorService pool;
    private final Iterator<A> left;
    private final Function<A, B> work;
    private final Deque<Future<B>> ahead = new ArrayDeque<>();

    Ahead(List<A> pieces, Function<A, B> work) {
        this.cores = Math.max(1, Math.min(pieces.size(), Runtime.getRuntime().availableProcessors()));
        this.pool = Executors.newFixedThreadPool(cores, r -> new Thread(null, r, "work", STACK));
        this.left = pieces.iterator();
        this.work = work;
    }

    boolean hasNext() {
        return left.hasNext() || !ahead.isEmpty();
    }

    /** The next result; what the work threw is thrown here. */
    B next() throws InterruptedException {
        while (left.hasNext() && ahead.size() < cores * EACH) {
            A a = left.next();
            ahead.add(pool.submit(() -> work.apply(a)));
        }
        try {
            return ahead.remove().get();
        } catch (ExecutionException e) {
            throw e.getCause() instanceof RuntimeException r ? r : new IllegalStateException(e.getCause());
        }
    }

    @Override
    public void close() {
        pool.shutdownNow();
    }
}
