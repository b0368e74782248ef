cd /var/tmp/browser; for d in bdev bdemo; do kill $(node -p "JSON.parse(require('fs').readFileSync('/var/tmp/$d/run.json')).pid") 2>/dev/null; done
for i in $(seq 30); do pgrep -f "tsx dev-(serve|demo).ts" >/dev/null || break; sleep 1; done; rm -f .next/lock /var/tmp/bdev/log /var/tmp/bdemo/log
(nohup nice -n -5 node --import tsx dev-serve.ts > /var/tmp/bdev/log 2>&1 &) ; for i in $(seq 150); do grep -q "ready\|rror" /var/tmp/bdev/log && break; sleep 1; done; tail -2 /var/tmp/bdev/log
(nohup nice -n -5 node --import tsx dev-demo.ts > /var/tmp/bdemo/log 2>&1 &); for i in $(seq 100); do grep -q "ready\|rror" /var/tmp/bdemo/log && break; sleep 1; done; tail -1 /var/tmp/bdemo/log
