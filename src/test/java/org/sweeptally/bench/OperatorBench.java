package org.sweeptally.bench;

import java.io.File;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.HashSet;
import java.util.List;
import java.util.Locale;
import java.util.Set;
import java.util.concurrent.ConcurrentLinkedQueue;
import java.util.function.Predicate;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.sweeptally.site.EffectiveSettings;
import org.sweeptally.site.Site;
import org.sweeptally.stream.BenchBus;
import org.sweeptally.stream.Operator;
import org.sweeptally.stream.OperatorSettings;
import org.sweeptally.stream.RecordedScans;
import org.sweeptally.stream.TransportFloor;

/**
 * What the operator takes on an embedded broker in the same process, beside its {@link TransportFloor}: throughput on a
 * backlog, latency live, recovery by the length of the tail, and how long nothing is published after a SIGKILL. Where
 * nothing else is said there is one sensor and there are two regions on two partitions; every closed scan makes a count
 * in every region. Broker, operator and subscriber share the machine's cores: only ratios within a run mean something.
 *
 * <p>To run: {@code mvn -q test-compile exec:exec -Dexec.classpathScope=test -Dexec.executable=java
 * -Dexec.args="-Xmx2g -cp %classpath org.sweeptally.bench.OperatorBench"}, with one or more of
 * {@code throughput-one}, {@code throughput-fifty}, {@code throughput-small}, {@code threads}, {@code latency},
 * {@code settings}, {@code recovery} and {@code kill} behind the class to run only these.
 */
public final class OperatorBench {

    private static final Pattern BACK =
            Pattern.compile("partition (\\d+) is back: .*, (\\d+) of \\d+ entries applied again in (\\d+) ms");
    private static final Duration START = Duration.ofSeconds(60);
    private static final long LIVE_INTERVAL_MILLIS = 50;

    /** The floor replays the records of so many scans. */
    private static final int RECORDED_SCANS = 200;

    private final Path folder;
    private int runs;

    /** The floor that writes counts alone, the floor that writes the operator's records, and the operator. */
    enum Kind { BARE, RECORDS, OPERATOR }

    /**
     * What is laid on the bus.
     *
     * @param regions    as many partitions of the region log
     * @param detections in each scan
     * @param perPart    of them in each part
     * @param scans      of all sensors together
     */
    record Load(int regions, int sensors, int detections, int perPart, int scans) {}

    /** Something that turns parts into counts. */
    private interface Started extends AutoCloseable {
        @Override
        void close();
    }

    /** Latencies of one run in milliseconds. */
    record Latency(int counts, double p50, double p99) {}

    /** What a partition's recovery said. */
    record Recovered(int partition, long entries, long millis) {}

    OperatorBench(Path folder) {
        this.folder = folder;
    }

    public static void main(String[] args) {
        Set<String> chosen = new HashSet<>(args.length == 0
                ? List.of("throughput-one", "throughput-fifty", "throughput-small", "threads", "latency", "settings",
                        "recovery", "kill") : Arrays.asList(args));
        int code = 1;
        try {
            new OperatorBench(Files.createTempDirectory("operator-bench")).print(chosen);
            code = 0;
        } catch (Exception e) {
            e.printStackTrace();
        } finally {
            // The broker's threads would keep a failed run alive.
            System.exit(code);
        }
    }

    private void print(Set<String> chosen) throws Exception {
        if (chosen.contains("throughput-one")) {
            printThroughput(new Load(2, 1, 50, 1, 3_200), 3);
        }
        if (chosen.contains("throughput-fifty")) {
            printThroughput(new Load(2, 1, 50, 50, 4_000), 3);
        }
        if (chosen.contains("throughput-small")) {
            printThroughput(new Load(2, 1, 1, 1, 30_000), 3);
        }
        if (chosen.contains("threads")) {
            for (int regions : new int[] {2, 4}) {
                for (String threads : new String[] {"1", "2"}) {
                    print("%s stream threads", threads);
                    printThroughput(new Load(regions, 3, 50, 50, 2_000), 2, "num.stream.threads", threads);
                }
            }
        }
        if (chosen.contains("latency")) {
            for (int sensors : new int[] {1, 3}) {
                print("latency, %d sensors: floor %s, operator %s", sensors,
                        latency(Kind.RECORDS, sensors, 50, 600), latency(Kind.OPERATOR, sensors, 50, 600));
            }
        }
        if (chosen.contains("settings")) {
            printSettings("commit.interval.ms", "50", "100", "200");
            printSettings("producer.linger.ms", "0", "5", "20");
            printSettings("producer.batch.size", "16384", "65536", "262144");
        }
        if (chosen.contains("recovery")) {
            for (int scans : new int[] {250, 1_000, 4_000}) {
                print("recovery, %d scans of 50 detections: %s", scans, recovery(50, scans));
            }
        }
        if (chosen.contains("kill")) {
            for (int trial = 0; trial < 3; trial++) {
                print("kill: restarted %s s, taken over %s s", kill(false), kill(true));
            }
        }
    }

    /** What a setting is worth: throughput by turns over its values, then latency with each. */
    private void printSettings(String name, String... values) throws Exception {
        Load load = new Load(2, 1, 50, 50, 2_000);
        for (int round = 0; round <= 2; round++) {
            for (String value : values) {
                print("settings, %s=%s%s: %.0f parts/s", name, value, round == 0 ? " (warming)" : "",
                        throughput(Kind.OPERATOR, load, name, value));
            }
        }
        for (String value : values) {
            print("settings, %s=%s: latency %s", name, value, latency(Kind.OPERATOR, 1, 50, 200, name, value));
        }
    }

    /** One warming round, then the bare floor, the floor of the same records and the operator by turns. */
    private void printThroughput(Load load, int rounds, String... further) throws Exception {
        for (int round = 0; round <= rounds; round++) {
            double bare = throughput(Kind.BARE, load, further);
            double floor = throughput(Kind.RECORDS, load, further);
            double operator = throughput(Kind.OPERATOR, load, further);
            print("throughput, %s%s: bare %.0f, floor %.0f, operator %.0f parts/s, operator over floor %.2f, over bare"
                            + " %.2f",
                    load, round == 0 ? " (warming)" : "", bare, floor, operator, operator / floor, operator / bare);
        }
    }

    /** Parts a second over a backlog laid down whole before the start, from the first routed to the last count. */
    double throughput(Kind kind, Load load, String... further) throws Exception {
        Site site = BenchBus.newSite(load.regions(), load.sensors(), 500);
        int parts = Backlog.lay(site, load);
        int counts = load.scans() * site.regions().size();
        try (CountWatch watch = new CountWatch(site);
                Started started = start(kind, site, load, further)) {
            watch.until("all counts", () -> watch.seen().size() >= counts);
            return parts / watch.seconds();
        }
    }

    /** From handing a closing part to the bus until its committed count reaches a subscriber, at 20 scans a second. */
    Latency latency(Kind kind, int sensors, int detections, int scans, String... further) throws Exception {
        Site site = BenchBus.newSite(2, sensors, 500);
        Load load = new Load(2, sensors, detections, detections, RECORDED_SCANS);
        try (CountWatch watch = new CountWatch(site);
                Started started = start(kind, site, load, further);
                LiveSensor sensor = new LiveSensor(site, detections, LIVE_INTERVAL_MILLIS)) {
            int warming = scans / 2;
            int regions = site.regions().size();
            watch.until("the live counts", () -> watch.seen().size() >= (warming + scans) * regions);
            double[] millis = watch.seen().stream()
                    .skip((long) warming * regions)
                    .mapToDouble(count -> (count.nanos() - sensor.sentNanos().get(count.scanTimeMicros())) / 1e6)
                    .sorted()
                    .toArray();
            return new Latency(millis.length, millis[millis.length / 2], millis[millis.length * 99 / 100]);
        }
    }

    /**
     * What a second start says of the tail, where no snapshot but by the bounds on ticks and work was taken. The
     * transaction timeout, and with it the bound on work, is raised, or there would be no long tail to measure.
     */
    List<Recovered> recovery(int detections, int scans) throws Exception {
        Site site = BenchBus.newSite(2, 1, 1_000_000);
        Backlog.lay(site, new Load(2, 1, detections, detections, scans));
        String[] patient = {"producer.transaction.timeout.ms", "300000"};
        OperatorSettings settings = BenchBus.settings(site, folder.resolve("state-" + runs++), patient);
        try (CountWatch watch = new CountWatch(site); Operator first = new Operator(settings, sentence -> { })) {
            first.start();
            watch.until("all counts", () -> watch.seen().size() >= scans * site.regions().size());
        }
        ConcurrentLinkedQueue<String> said = new ConcurrentLinkedQueue<>();
        try (Operator second = new Operator(settings, said::add)) {
            second.start();
            second.awaitRunning(START);
        }
        List<Recovered> recovered = new ArrayList<>();
        for (String sentence : said) {
            Matcher back = BACK.matcher(sentence);
            if (back.find()) {
                recovered.add(new Recovered(Integer.parseInt(back.group(1)), Long.parseLong(back.group(2)),
                        Long.parseLong(back.group(3))));
            }
        }
        return recovered;
    }

    /**
     * Seconds from SIGKILL of an operator's process until every partition had a count of a scan sent after it.
     *
     * @param takenOver whether a second operator was running already; otherwise the killed one is started again at once
     */
    double kill(boolean takenOver) throws Exception {
        Site site = BenchBus.newSite(2, 1, 500);
        Load load = new Load(2, 1, 50, 50, RECORDED_SCANS);
        Path state = folder.resolve("state-" + runs++);
        Process killed = process(site, state);
        Process restarted = null;
        try (CountWatch watch = new CountWatch(site);
                LiveSensor sensor = new LiveSensor(site, 50, LIVE_INTERVAL_MILLIS);
                Started other = takenOver ? start(Kind.OPERATOR, site, load) : () -> { }) {
            watch.until("counts before the kill", () -> watch.seen().size() > 300);
            long settled = System.nanoTime() + 10_000_000_000L;
            watch.until("the settling", () -> System.nanoTime() > settled);
            killed.destroyForcibly().waitFor();
            long killNanos = System.nanoTime();
            if (!takenOver) {
                restarted = process(site, state);
            }
            int before = watch.seen().size();
            Predicate<CountWatch.Seen> isNew = count ->
                    sensor.sentNanos().getOrDefault(count.scanTimeMicros(), 0L) > killNanos;
            watch.until("a new count on every partition", () -> watch.seen().stream()
                            .skip(before).filter(isNew).map(CountWatch.Seen::partition).distinct().count()
                    == site.regions().size());
            return (System.nanoTime() - killNanos) / 1e9;
        } finally {
            killed.destroyForcibly();
            if (restarted != null) {
                restarted.destroyForcibly().waitFor();
            }
        }
    }

    private Started start(Kind kind, Site site, Load load, String... further) throws InterruptedException {
        OperatorSettings settings = BenchBus.settings(site, folder.resolve("state-" + runs++), further);
        if (kind == Kind.OPERATOR) {
            Operator started = new Operator(settings, OperatorBench::sayTrouble);
            started.start();
            started.awaitRunning(START);
            return started::close;
        }
        RecordedScans recorded = kind == Kind.BARE
                ? RecordedScans.none()
                : RecordedScans.of(site, Backlog.parts(site, load, Math.min(load.scans(), RECORDED_SCANS), 0));
        TransportFloor started = new TransportFloor(settings, recorded);
        started.start();
        started.awaitRunning(START);
        return started::close;
    }

    private Process process(Site site, Path state) throws IOException {
        Path file = Files.writeString(folder.resolve(site.name() + ".yaml"), EffectiveSettings.text(site));
        String classPath = System.getProperty("surefire.test.class.path", System.getProperty("java.class.path"));
        return new ProcessBuilder(Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-Xmx512m", "-cp", classPath, "org.sweeptally.cli.Main", "run", "--site", file.toString(),
                "--bus", BenchBus.address(), "--detections", BenchBus.names(site).detections(),
                "--state", state.toString())
                .redirectErrorStream(true)
                .redirectOutput(ProcessBuilder.Redirect.appendTo(new File(folder.toFile(), site.name() + ".txt")))
                .start();
    }

    /** A run in which a thread failed is no measurement. */
    private static void sayTrouble(String sentence) {
        if (sentence.contains("failed")) {
            print("trouble: %s", sentence);
        }
    }

    private static void print(String format, Object... values) {
        System.out.println(String.format(Locale.ROOT, format, values));
    }
}
