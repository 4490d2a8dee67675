package jobs

import (
	"github.com/prometheus/client_golang/prometheus"

	"tarn/store"
)

// collector counts the jobs of the store by state when it is asked.
type collector struct {
	store *store.Store
	jobs  *prometheus.Desc
}

// NewCollector returns the metrics of the queue.
func NewCollector(s *store.Store) prometheus.Collector {
	return &collector{s, prometheus.NewDesc("tarn_jobs", "Jobs by state.", []string{"state"}, nil)}
}

// Describe implements prometheus.Collector.
func (c *collector) Describe(out chan<- *prometheus.Desc) { out <- c.jobs }

// Collect implements prometheus.Collector.
func (c *collector) Collect(out chan<- prometheus.Metric) {
	counts, err := c.store.CountJobs()
	if err != nil {
		out <- prometheus.NewInvalidMetric(c.jobs, err)
		return
	}
	for _, state := range []store.State{store.Queued, store.Running, store.Paused, store.Done, store.Failed, store.Cancelled} {
		out <- prometheus.MustNewConstMetric(c.jobs, prometheus.GaugeValue, float64(counts[state]), string(state))
	}
}
