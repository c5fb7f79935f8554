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
import java.util.Map;
import java.util.Set;
import java.util.concurrent.ConcurrentLinkedQueue;
import java.util.concurrent.Future;
import java.util.function.Predicate;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.apache.kafka.clients.producer.KafkaProducer;
import org.apache.kafka.clients.producer.ProducerRecord;
import org.apache.kafka.clients.producer.RecordMetadata;
import org.sweeptally.event.Part;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.EffectiveSettings;
import org.sweeptally.site.Site;
import org.sweeptally.stream.BenchBus;
import org.sweeptally.stream.Operator;
import org.sweeptally.stream.OperatorSettings;
import org.sweeptally.stream.TransportFloor;

/**
 * What the operator takes on an embedded broker in the same process, beside its {@link TransportFloor}: throughput on a
 * backlog, latency live, recovery by the length of the tail, and how long nothing is published after a SIGKILL. One
 * sensor, two regions on two partitions; every closed scan makes a count in both. Broker,
 * operator and subscriber share the machine's cores: only ratios within a run mean something.
 *
 * <p>To run: {@code mvn -q test-compile exec:exec -Dexec.classpathScope=test -Dexec.executable=java
 * -Dexec.args="-Xmx2g -cp %classpath org.sweeptally.bench.OperatorBench"}, with one or more of {@code throughput},
 * {@code latency}, {@code recovery} and {@code kill} behind the class to run only these.
 */
public final class OperatorBench {

    private static final Pattern BACK =
            Pattern.compile("partition (\\d+) is back: .*, (\\d+) of \\d+ entries applied again in (\\d+) ms");
    private static final Duration START = Duration.ofSeconds(60);
    private static final long BACKLOG_INTERVAL_MICROS = 2_500_000;
    private static final long LIVE_INTERVAL_MILLIS = 50;

    private final Path folder;
    private int runs;

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
                ? List.of("throughput", "latency", "recovery", "kill") : Arrays.asList(args));
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
        if (chosen.contains("throughput")) {
            printThroughput(50, 1, 3_200, 3);
            printThroughput(50, 50, 5_000, 3);
            printThroughput(1, 1, 50_000, 3);
        }
        if (chosen.contains("latency")) {
            for (int detections : new int[] {1, 50}) {
                print("latency, %d detections: floor %s, operator %s", detections,
                        latency(false, detections, 600), latency(true, detections, 600));
            }
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

    /** One warming pair, then floor and operator by turns. */
    private void printThroughput(int detections, int perPart, int scans, int pairs) throws Exception {
        for (int pair = 0; pair <= pairs; pair++) {
            double floor = throughput(false, detections, perPart, scans);
            double operator = throughput(true, detections, perPart, scans);
            print("throughput, scans of %d detections in parts of %d%s: floor %.0f, operator %.0f parts/s, ratio %.2f",
                    detections, perPart, pair == 0 ? " (warming)" : "", floor, operator, operator / floor);
        }
    }

    /** Parts a second over a backlog that lies there whole before the start, from the first routed to the last count. */
    double throughput(boolean operator, int detections, int perPart, int scans) throws Exception {
        Site site = BenchBus.newSite(500);
        int parts = backlog(site, detections, perPart, scans);
        int counts = scans * site.regions().size();
        try (CountWatch watch = new CountWatch(site);
                Started started = start(operator, site)) {
            watch.until("all counts", () -> watch.seen().size() >= counts);
            return parts / watch.seconds();
        }
    }

    /** From handing a closing part to the bus until its committed count reaches a subscriber, at 20 scans a second. */
    Latency latency(boolean operator, int detections, int scans) throws Exception {
        Site site = BenchBus.newSite(500);
        try (CountWatch watch = new CountWatch(site);
                Started started = start(operator, site);
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
        Site site = BenchBus.newSite(1_000_000);
        backlog(site, detections, detections, scans);
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
        Site site = BenchBus.newSite(500);
        Path state = folder.resolve("state-" + runs++);
        Process killed = process(site, state);
        Process restarted = null;
        try (CountWatch watch = new CountWatch(site);
                LiveSensor sensor = new LiveSensor(site, 50, LIVE_INTERVAL_MILLIS);
                Started other = takenOver ? start(true, site) : () -> { }) {
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
            watch.until("a new count on every partition", () -> watch.seen().subList(before, watch.seen().size())
                    .stream().filter(isNew).map(CountWatch.Seen::partition).distinct().count() == site.regions().size());
            return (System.nanoTime() - killNanos) / 1e9;
        } finally {
            killed.destroyForcibly();
            if (restarted != null) {
                restarted.destroyForcibly().waitFor();
            }
        }
    }

    private Started start(boolean operator, Site site) throws InterruptedException {
        OperatorSettings settings = BenchBus.settings(site, folder.resolve("state-" + runs++));
        if (operator) {
            Operator started = new Operator(settings, OperatorBench::sayTrouble);
            started.start();
            started.awaitRunning(START);
            return started::close;
        }
        TransportFloor started = new TransportFloor(settings);
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

    /** Puts scans on the bus, the last of which is of now; returns in how many parts. */
    private static int backlog(Site site, int detections, int perPart, int count) throws Exception {
        BenchScans scans = new BenchScans(detections, 1);
        long begin = System.currentTimeMillis() * 1000 - count * BACKLOG_INTERVAL_MICROS;
        Map<String, Object> settings = BenchBus.clients().producer("backlog");
        // On a partition made just now a first batch that is sent again behind a second one is refused for ever.
        settings.put("max.in.flight.requests.per.connection", "1");
        List<Future<RecordMetadata>> sent = new ArrayList<>();
        try (KafkaProducer<byte[], byte[]> producer = new KafkaProducer<>(settings)) {
            for (int i = 0; i < count; i++) {
                long time = begin + i * BACKLOG_INTERVAL_MICROS;
                for (Part part : scans.next(time, BACKLOG_INTERVAL_MICROS / 1e6, perPart)) {
                    sent.add(producer.send(new ProducerRecord<>(
                            BenchBus.names(site).detections(), new byte[] {'n'}, Wire.encode(part))));
                }
            }
        }
        for (Future<RecordMetadata> one : sent) {
            one.get();
        }
        return sent.size();
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
