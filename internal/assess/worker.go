package assess

import (
	"context"

	"ridgehop/profile"
)

// Worker judges many links one after the other, as a screening does, with memory
// that it keeps. One goroutine uses it at a time.
type Worker struct {
	service *Service
	judged  Assessment
	ws      profile.Workspace
}

// NewWorker makes a Worker of the service.
func (s *Service) NewWorker() *Worker { return &Worker{service: s} }

// Judge judges one link like Service.Assess, without cautions, id and extra
// height. The assessment is valid until the next call. The errors are those of
// Assess.
func (w *Worker) Judge(ctx context.Context, request Request) (*Assessment, error) {
	w.judged.Radio = nil
	if err := w.service.judge(ctx, request, &w.judged, &w.ws, brief); err != nil {
		return nil, err
	}
	return &w.judged, nil
}
