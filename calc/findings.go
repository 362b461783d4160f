package calc
func (p *plant) findings(r *Report) {}
func (p *plant) remedy(r *Report) {}
