package backcone.engine.eval;

import backcone.engine.graph.DriveGraph;
import backcone.engine.graph.Reach;
import org.jspecify.annotations.Nullable;

/** The values of a graph for the numbers as written, and for other loads, readings or numbers. */
public final class Run {
    public final DriveGraph graph;
    private final double[] inputs;
    private final double[] value;
    private final java.util.Map<String, double[]> others = new java.util.HashMap<>();

    public Run(DriveGraph graph) {
        this(graph, graph.inputValues());
    }

    /** The same graph for other numbers: one value per input of {@link DriveGraph#inputs()}, in base units. */
    public Run(DriveGraph graph, double[] inputs) {
        this.graph = graph;
        this.inputs = inputs;
        this.value = new Evaluator(graph.tape()).run(1, inputs).clone();
    }

    public double at(int register) {
        return register < 0 ? Double.NaN : value[register];
    }

    public double[] values() {
        return value;
    }

    public Faults faults() {
        return new Faults(graph.tape(), value);
    }

    /** One register as a function of the factor on the load; only what changes with the load is computed again. */
    public java.util.function.DoubleUnaryOperator underLoad(int register) {
        Evaluator e = new Evaluator(graph.tape(), value, graph.tape().between(register, graph.loadRegister()));
        return load -> e.run(load, inputs)[register];
    }

    /** The target number {@code target} of {@code reach} as a function of the factor on the load. */
    public java.util.function.DoubleUnaryOperator underLoad(Reach reach, int target) {
        int register = reach.register(target);
        Evaluator e = new Evaluator(graph.tape(), value, graph.tape().between(reach, target, graph.loadRegister()));
        return load -> e.run(load, inputs)[register];
    }

    /** All registers with one input replaced; only what changes is computed again, and the answer is kept. */
    public double[] with(int input, double v) {
        return others.computeIfAbsent(input + "=" + v, k -> {
            double[] other = inputs.clone();
            other[input] = v;
            int register = graph.inputs().get(input).register();
            return new Evaluator(graph.tape(), value, graph.tape().after(register)).run(1, other);
        });
    }

    /** Whether load acts on a register at all. */
    public boolean loadActsOn(int register) {
        int load = graph.loadRegister();
        return load >= 0 && register >= 0 && graph.tape().between(register, load).count > 0;
    }

    public double @Nullable [] inputs() {
        return inputs;
    }
}
